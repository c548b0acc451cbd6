import { z } from 'zod'
import { Instant, line, Person, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'

export const Reach = z.enum(['only me', 'my teachers', 'named', 'group'])
export type Reach = z.infer<typeof Reach>

export const IngestState = z.enum(['waiting', 'working', 'ready', 'failed'])
export const Take = z.object({
  id: Uuid,
  groupId: Uuid,
  tuneId: Uuid.nullable(),
  /** The take it was played over; the asker may not be among those who hear that one. */
  overTakeId: Uuid.nullable(),
  title: z.string(),
  uploader: Person,
  reach: Reach,
  named: z.array(Person),
  createdAt: Instant,
  state: IngestState,
  /** What the worker is doing, in words, and how far it is (0-1). */
  stage: z.string().nullable(),
  progress: z.number(),
  /** Why it failed, for people. */
  fault: z.string().nullable(),
  durationSec: z.number().nullable(),
  sampleRate: z.number().nullable(),
  channels: z.number().nullable(),
  loudnessLufs: z.number().nullable(),
  gainDb: z.number().nullable(),
  /** Above (+) or below A 440, -50 to 50; null where the recording does not tell. */
  tuningCents: z.number().nullable(),
  commentCount: z.number().int(),
  openCount: z.number().int(),
  abilities: z.array(z.string())
})
export type Take = z.infer<typeof Take>

/** What the owner of a group sees of a take they may not hear. */
export const TakeCard = z.object({
  id: Uuid,
  title: z.string(),
  uploader: Person,
  durationSec: z.number().nullable(),
  createdAt: Instant,
  abilities: z.array(z.string())
})
export type TakeCard = z.infer<typeof TakeCard>

const GroupParams = z.object({ groupId: Uuid })
const TakeParams = z.object({ takeId: Uuid })

/** Multipart fields are text: lists travel as JSON. */
export const UploadFields = z.object({
  id: Uuid,
  title: line(limits.title),
  tuneId: Uuid.optional(),
  reach: Reach,
  /** The uploader confirms "I play on this, or those who do have agreed". */
  agreed: z.literal('yes', 'Confirm that everyone on it has agreed.')
})

/** How a recording lies along the take it was played over. */
export const PlayedOver = z.strictObject({
  takeId: Uuid,
  /** Second of that take at this one's second 0; below 0 when it begins before it. */
  placeSec: z.number().min(-60).max(limits.takeSec),
  /** Seconds of that take in one of this: 0.7 when it was played at 70 %. */
  rate: z.number().min(0.1).max(2)
})
export type PlayedOver = z.infer<typeof PlayedOver>

export const PiecesManifest = z.object({
  sampleRate: z.number().int(),
  channels: z.number().int(),
  totalFrames: z.number().int(),
  mime: z.string(),
  pieces: z.array(
    z.object({
      firstSample: z.number().int(),
      frames: z.number().int(),
      /** Frames to drop from the front of the decoded piece. */
      preroll: z.number().int(),
      /** Frames a decoder gives for the whole piece. */
      decodedFrames: z.number().int(),
      bytes: z.number().int(),
      url: z.string()
    })
  )
})
export type PiecesManifest = z.infer<typeof PiecesManifest>

export const takeRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/takes',
    access: 'group:read',
    summary: 'The takes of a group that the asker may hear; for its owner also cards of the others',
    params: GroupParams,
    query: z.object({ tuneId: Uuid.optional(), cursor: z.string().max(200).optional() }),
    response: z.object({ items: z.array(Take), cards: z.array(TakeCard), nextCursor: z.string().nullable() })
  }),
  upload: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/takes',
    access: 'group:add-take',
    summary: 'Upload a recording as a take',
    kind: 'upload',
    fileField: 'recording',
    maxBytes: limits.uploadBytes,
    params: GroupParams,
    /** `over` is a PlayedOver, as JSON. */
    body: UploadFields.extend({ over: z.string().max(300).optional() }),
    status: 201,
    response: Take
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId',
    access: 'take:read',
    summary: 'One take',
    params: TakeParams,
    response: Take
  }),
  update: defineRoute({
    method: 'PATCH',
    path: '/api/takes/:takeId',
    access: 'take:edit',
    summary: 'Rename a take, put it to a tune, change who may hear it',
    params: TakeParams,
    body: z.object({
      title: line(limits.title).optional(),
      tuneId: Uuid.nullable().optional(),
      reach: Reach.optional(),
      namedIds: z.array(Uuid).max(limits.takeNames).optional()
    }),
    response: Take
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/takes/:takeId',
    access: 'take:delete',
    summary: 'Delete a take and all its files',
    params: TakeParams
  }),
  retry: defineRoute({
    method: 'POST',
    path: '/api/takes/:takeId/retry',
    access: 'take:edit',
    summary: 'Try again to read a recording that failed',
    params: TakeParams,
    response: Take
  }),
  audio: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/audio',
    access: 'take:hear',
    summary: 'The rendition, with ranges',
    kind: 'stream',
    params: TakeParams
  }),
  original: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/original',
    access: 'take:hear',
    summary: 'The recording as it was uploaded',
    kind: 'stream',
    params: TakeParams
  }),
  peaks: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/peaks',
    access: 'take:hear',
    summary: 'Peaks at several zooms (binary), with ranges',
    kind: 'stream',
    params: TakeParams
  }),
  pieces: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/pieces',
    access: 'take:hear',
    summary: 'The manifest of the pieces',
    params: TakeParams,
    response: PiecesManifest
  }),
  piece: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/pieces/:index',
    access: 'take:hear',
    summary: 'One independently decodable piece',
    kind: 'stream',
    params: TakeParams.extend({ index: z.string().regex(/^\d{1,5}$/) })
  })
}

const RecordingParams = z.object({ recordingId: Uuid })
export const recordingRoutes = {
  start: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/recordings',
    access: 'group:add-take',
    summary: 'Begin a recording made in the browser',
    params: GroupParams,
    body: z.object({ id: Uuid, mime: z.string().max(100) }),
    status: 201,
    response: z.object({ id: Uuid, nextPiece: z.number().int() })
  }),
  piece: defineRoute({
    method: 'PUT',
    path: '/api/recordings/:recordingId/pieces/:index',
    access: 'recording:write',
    summary: 'Send one piece of it, in order; the same piece twice is harmless',
    kind: 'raw',
    maxBytes: limits.pieceBytes,
    params: RecordingParams.extend({ index: z.string().regex(/^\d{1,6}$/) }),
    response: z.object({ nextPiece: z.number().int() })
  }),
  finish: defineRoute({
    method: 'POST',
    path: '/api/recordings/:recordingId/finish',
    access: 'recording:write',
    summary: 'Keep the recording as a take',
    params: RecordingParams,
    body: UploadFields.extend({ pieces: z.number().int().min(1) }),
    status: 201,
    response: Take
  }),
  drop: defineRoute({
    method: 'DELETE',
    path: '/api/recordings/:recordingId',
    access: 'recording:write',
    summary: 'Throw the recording away',
    params: RecordingParams
  })
}
