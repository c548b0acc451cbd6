import { z } from 'zod'
import { Instant, line, Seconds, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'
import { ladderLimits } from '@shared/practice/ladder'

const Rate = z.number().min(ladderLimits.minRate).max(ladderLimits.maxRate)
/** shared/practice/ladder.ts, with its bounds. */
export const Ladder = z
  .object({
    from: Rate,
    to: Rate,
    step: z.number().min(-1.3).max(1.3),
    every: z.number().int().min(1).max(ladderLimits.maxEvery)
  })
  .refine((l) => (l.to - l.from) * l.step >= 0, { path: ['step'], message: 'That way it never gets there.' })

const LoopSpan = z
  .object({ startSec: Seconds, endSec: Seconds })
  .refine((s) => s.endSec > s.startSec, { path: ['endSec'], message: 'The end comes before the start.' })
const RestBeats = z.number().int().min(0).max(64)

/** A place of a take that one person practises, kept under a name and seen by nobody else. */
export const SavedLoop = z.object({
  id: Uuid,
  takeId: Uuid,
  name: z.string(),
  span: z.object({ startSec: z.number(), endSec: z.number() }),
  /** Speed it was kept at, as a share of full speed; null leaves the speed as it is. */
  rate: z.number().nullable(),
  ladder: z.object({ from: z.number(), to: z.number(), step: z.number(), every: z.number() }).nullable(),
  /** Silence between two passes. */
  restBeats: z.number(),
  createdAt: Instant,
  updatedAt: Instant
})
export type SavedLoop = z.infer<typeof SavedLoop>

const TakeParams = z.object({ takeId: Uuid })
const SavedLoopParams = z.object({ savedLoopId: Uuid })

export const CreateSavedLoop = z.object({
  id: Uuid,
  name: line(limits.savedLoopName),
  span: LoopSpan,
  rate: Rate.nullable(),
  ladder: Ladder.nullable(),
  restBeats: RestBeats
})
export type CreateSavedLoop = z.infer<typeof CreateSavedLoop>

export const ChangeSavedLoop = CreateSavedLoop.omit({ id: true }).partial()
export type ChangeSavedLoop = z.infer<typeof ChangeSavedLoop>

export const savedLoopRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/saved-loops',
    access: 'take:practise',
    summary: 'Loops that the person signed in keeps on a take, in the order of their place',
    params: TakeParams,
    response: z.object({ items: z.array(SavedLoop) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/takes/:takeId/saved-loops',
    access: 'take:practise',
    summary: 'Keep a loop on a take',
    params: TakeParams,
    body: CreateSavedLoop,
    status: 201,
    response: SavedLoop
  }),
  change: defineRoute({
    method: 'PATCH',
    path: '/api/saved-loops/:savedLoopId',
    access: 'saved-loop:change',
    summary: 'Rename a kept loop, or change its place, speed, ladder or rest',
    params: SavedLoopParams,
    body: ChangeSavedLoop,
    response: SavedLoop
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/saved-loops/:savedLoopId',
    access: 'saved-loop:delete',
    summary: 'Delete a kept loop',
    params: SavedLoopParams
  })
}
