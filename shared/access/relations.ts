// How a person stands to a thing. Resolved as a set on the server (server/access/relations.ts).
export const relations = [
  /** Not signed in. */
  'anonymous',
  /** Signed in; everybody signed in is at least this. */
  'stranger',
  'listener',
  'member',
  'teacher',
  'owner',
  /** Uploaded the take. */
  'takeOwner',
  /** A linked teacher of the uploader, on a take whose reach lets teachers hear it. */
  'takeOwnersTeacher',
  /** Named on the take, with a role that may write. */
  'namedMember',
  /** Named on the take, a listener of the group. */
  'namedListener',
  /** May hear the take because it is shared with the group, and may write. */
  'hearer',
  /** A listener of the group who may hear a take shared with the group. */
  'guestHearer',
  /** Wrote the comment or reply, keeps the loop, asked for the clip, made the invitation, is a side of the link. */
  'author',
  'operator'
] as const
export type Relation = (typeof relations)[number]
