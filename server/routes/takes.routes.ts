import type { recordingRoutes, takeRoutes } from '@shared/contracts/takes'
import { readPlayedOver } from '@server/services/played-over'
import type { Handlers } from '@server/http/handlers'
import type { RecordingService } from '@server/services/recordings.service'
import type { TakeService } from '@server/services/takes.service'

export const takeHandlers = (takes: TakeService): Handlers<typeof takeRoutes> => ({
  list: ({ actor, relations, params, query }) => takes.list(actor, relations, params.groupId, query),
  upload: ({ actor, params, body: { over, ...said }, file }) =>
    takes.create(actor, params.groupId, { ...said, over: readPlayedOver(over) }, file),
  get: ({ relations, params }) => takes.get(relations, params.takeId),
  update: ({ actor, relations, params, body }) => takes.update(actor, relations, params.takeId, body),
  remove: async ({ actor, params, asker }) => {
    await takes.remove(actor, params.takeId, asker)
    return {}
  },
  retry: ({ actor, relations, params }) => takes.retry(actor, relations, params.takeId),
  audio: ({ params }) => takes.audio(params.takeId),
  original: ({ params }) => takes.original(params.takeId),
  peaks: ({ params }) => takes.peaks(params.takeId),
  pieces: ({ params }) => takes.pieces(params.takeId),
  piece: ({ params }) => takes.piece(params.takeId, Number(params.index))
})

export const recordingHandlers = (recordings: RecordingService): Handlers<typeof recordingRoutes> => ({
  start: ({ actor, params, body }) => recordings.start(actor, params.groupId, body),
  piece: ({ params, bytes }) => recordings.piece(params.recordingId, Number(params.index), bytes),
  finish: ({ actor, params, body }) => recordings.finish(actor, params.recordingId, body),
  drop: async ({ params }) => {
    await recordings.drop(params.recordingId)
    return {}
  }
})
