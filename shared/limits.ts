// Lengths and sizes that server and client both hold to.
export const limits = {
  name: 80,
  title: 120,
  email: 254,
  passwordMin: 8,
  passwordMax: 200,
  commentText: 4000,
  replyText: 4000,
  /** Longest take, seconds (six hours). */
  takeSec: 6 * 3600,
  /** One upload, bytes. */
  uploadBytes: 1024 ** 3,
  /** One piece of a recording made in the browser, bytes. */
  pieceBytes: 8 * 1024 ** 2,
  /** Takes a member may have in one group, and the bytes of their originals together. */
  takesPerMember: 2000,
  bytesPerMember: 40 * 1024 ** 3,
  /** Recordings being made in the browser at one time by one person. */
  openRecordings: 20,
  takeNames: 100,
  commentsPerTake: 5000,
  savedLoopName: 80,
  /** Loops that one person keeps on one take. */
  savedLoopsPerTake: 200,
  /** Longest file of a passage, seconds. */
  clipSec: 600,
  /** Such files live this long, days. */
  clipDays: 7,
  /** Of one person: being made or waiting for it, and in all. */
  clipsUnderWay: 4,
  clipsPerPerson: 60,
  keyName: 40,
  keysPerAction: 6,
  jsonBytes: 512 * 1024,
  operationsPerEdit: 200,
  /** Invitation links live this long, days. */
  invitationDays: 14,
  pageSize: 100
} as const
export type Bounds = { [K in keyof typeof limits]: number }
