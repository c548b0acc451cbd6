import { z } from 'zod'
import { Instant, line, Seconds, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'
import { lowFocusLimits, pitchLimits } from '@shared/audio/listening'
import { ClickGrid } from '@shared/practice/click-pattern'
import { ladderLimits } from '@shared/practice/ladder'

/** shared/audio/listening.ts, with its bounds. */
const ClipAids = z.strictObject({
  lowFocus: z.strictObject({
    isOn: z.boolean(),
    topHz: z.number().min(lowFocusLimits.minHz).max(lowFocusLimits.maxHz)
  }),
  channel: z.enum(['both', 'left', 'right', 'middle', 'sides']),
  isOctaveUp: z.boolean(),
  cents: z.number().min(-pitchLimits.cents).max(pitchLimits.cents)
})

/** What a file of a passage holds. */
export const ClipSettings = z.strictObject({
  span: z
    .strictObject({ startSec: Seconds, endSec: Seconds })
    .refine((s) => s.endSec - s.startSec >= 0.05, { path: ['endSec'], message: 'That is too short to be heard.' }),
  /** As a share of full speed. */
  rate: z.number().min(ladderLimits.minRate).max(ladderLimits.maxRate),
  semitones: z.number().int().min(pitchLimits.minSemitones).max(pitchLimits.maxSemitones),
  aids: ClipAids,
  /** Clicks along the take's bars. */
  click: ClickGrid.nullable(),
  clickLevel: z.number().min(0).max(1),
  countIn: z.enum(['none', 'one bar', 'two bars']),
  format: z.enum(['wav', 'm4a'])
})
export type ClipSettings = z.infer<typeof ClipSettings>

/** A passage of a take as a file, made for one person and seen by nobody else. */
export const Clip = z.object({
  id: Uuid,
  takeId: Uuid,
  settings: ClipSettings,
  state: z.enum(['waiting', 'working', 'ready', 'failed']),
  /** What is being done, in words, and how far it is (0-1). */
  stage: z.string().nullable(),
  progress: z.number(),
  /** Why it failed, for people. */
  fault: z.string().nullable(),
  /** The name it is downloaded under. */
  fileName: z.string(),
  durationSec: z.number(),
  bytes: z.number().nullable(),
  createdAt: Instant,
  expiresAt: Instant
})
export type Clip = z.infer<typeof Clip>

/** `place` is how the asker's desk calls the passage: the file is named after it. Without it, after bars or times. */
export const CreateClip = z.object({ id: Uuid, place: line(limits.title).nullable(), settings: ClipSettings })
export type CreateClip = z.infer<typeof CreateClip>

const TakeParams = z.object({ takeId: Uuid })
const ClipParams = z.object({ clipId: Uuid })

export const clipRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/clips',
    access: 'take:hear',
    summary: 'Files of passages that the person signed in has asked for, newest first',
    params: TakeParams,
    response: z.object({ items: z.array(Clip) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/takes/:takeId/clips',
    access: 'take:hear',
    summary: `Ask for a passage as a file; it is kept for ${limits.clipDays} days`,
    params: TakeParams,
    body: CreateClip,
    status: 201,
    response: Clip
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/clips/:clipId',
    access: 'clip:read',
    summary: 'How far the file of a passage is',
    params: ClipParams,
    response: Clip
  }),
  file: defineRoute({
    method: 'GET',
    path: '/api/clips/:clipId/file',
    access: 'clip:read',
    summary: 'The file of a passage',
    kind: 'stream',
    params: ClipParams
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/clips/:clipId',
    access: 'clip:delete',
    summary: 'Delete the file of a passage, or stop making it',
    params: ClipParams
  })
}
