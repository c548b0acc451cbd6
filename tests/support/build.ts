// Rows as the server would have written them, with what a test does not care about filled in.
import { randomBytes, randomUUID } from 'node:crypto'
import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { plainAids } from '@shared/audio/listening'
import type { ClipSettings } from '@shared/contracts/clips'
import type { Role } from '@shared/contracts/common'
import type { CommentKind } from '@shared/contracts/comments'
import type { Reach } from '@shared/contracts/takes'
import type { TransportState } from '@shared/contracts/sessions'
import { createHash } from 'node:crypto'
import { demoGroup } from '../../seeds/01_personas.ts'
import type { TestApp } from './app.ts'
import { idOf, memberKeys, type PersonKey } from './people.ts'
import { giveMedia, mediaSeconds } from './take-media.ts'

export const newId = (): string => randomUUID()
export { demoGroup }

export const rolesOfDemo: Record<(typeof memberKeys)[number], Role> = {
  mara: 'owner',
  jory: 'teacher',
  ines: 'member',
  tomas: 'member',
  pell: 'member',
  wren: 'member',
  aude: 'listener'
}

/** A group of the same people in the same roles as the demo group. */
export const buildGroup = async (
  { db }: Pick<TestApp, 'db'>,
  roles: Partial<Record<PersonKey, Role>> = rolesOfDemo
): Promise<string> => {
  const id = newId()
  await db('groups').insert({ id, name: 'Copy of a group' })
  await db('memberships').insert(
    Object.entries(roles).map(([key, role]) => ({ group_id: id, user_id: idOf(key as PersonKey), role }))
  )
  return id
}

const noPieces = { sampleRate: 44_100, channels: 2, totalFrames: 0, mime: 'audio/ogg', pieces: [] }

export interface TakeInput {
  by?: PersonKey
  groupId?: string
  reach?: Reach
  named?: PersonKey[]
  title?: string
  tuneId?: string | null
  /** With sound that can be fetched; without it only the row says so. */
  withMedia?: boolean
  state?: 'waiting' | 'working' | 'ready' | 'failed'
}

export const buildTake = async (app: Pick<TestApp, 'db' | 'storageDir'>, input: TakeInput = {}): Promise<string> => {
  const { by = 'ines', groupId = demoGroup.id, reach = 'group', named = [], withMedia = false, state = 'ready' } = input
  const id = newId()
  const media = withMedia ? await giveMedia(app.storageDir, id) : null
  await app.db('takes').insert({
    id,
    group_id: groupId,
    tune_id: input.tuneId ?? null,
    uploader_id: idOf(by),
    title: input.title ?? 'Second chorus',
    reach,
    agreed_at: new Date(),
    state,
    progress: state === 'ready' ? 1 : 0,
    duration_sec: state === 'ready' ? mediaSeconds : null,
    original_bytes: 100_000,
    original_mime: 'audio/mp4',
    ...(media
      ? {
          sample_rate: media.sampleRate,
          channels: media.channels,
          gain_db: media.loudness.gainDb,
          tuning_cents: media.tuningCents,
          rendition_mime: media.rendition.mime,
          manifest: JSON.stringify(media.manifest) as unknown as object
        }
      : { manifest: JSON.stringify(noPieces) as unknown as object })
  })
  if (named.length > 0) await app.db('take_names').insert(named.map((key) => ({ take_id: id, user_id: idOf(key) })))
  return id
}

export const buildTune = async (
  { db }: Pick<TestApp, 'db'>,
  input: { by?: PersonKey; groupId?: string; title?: string } = {}
): Promise<string> => {
  const id = newId()
  const { by = 'ines', groupId = demoGroup.id, title = 'Slack Tide' } = input
  await db('tunes').insert({ id, group_id: groupId, title, created_by: idOf(by) })
  return id
}

export const buildComment = async (
  { db }: Pick<TestApp, 'db'>,
  input: { takeId: string; by?: PersonKey; kind?: CommentKind; text?: string; startSec?: number }
): Promise<string> => {
  const id = newId()
  const { takeId, by = 'tomas', kind = 'question', text = 'Is this the ninth?', startSec = 1 } = input
  await db('comments').insert({
    id,
    take_id: takeId,
    author_id: idOf(by),
    kind,
    text,
    start_sec: startSec,
    end_sec: startSec + 1
  })
  return id
}

export const buildReply = async (
  { db }: Pick<TestApp, 'db'>,
  input: { commentId: string; by?: PersonKey; text?: string }
): Promise<string> => {
  const id = newId()
  const { commentId, by = 'pell', text = 'It is.' } = input
  await db('replies').insert({ id, comment_id: commentId, author_id: idOf(by), text })
  return id
}

export const buildSavedLoop = async (
  { db }: Pick<TestApp, 'db'>,
  input: { takeId: string; by?: PersonKey; name?: string; startSec?: number }
): Promise<string> => {
  const id = newId()
  const { takeId, by = 'tomas', name = 'The turnaround', startSec = 1 } = input
  await db('saved_loops').insert({
    id,
    take_id: takeId,
    user_id: idOf(by),
    name,
    start_sec: startSec,
    end_sec: startSec + 1
  })
  return id
}

/** A finished file of a passage: its row and, in the storage, some bytes. */
export const buildClip = async (
  app: Pick<TestApp, 'db' | 'storageDir'>,
  input: { takeId: string; by?: PersonKey; state?: 'waiting' | 'ready'; expiresAt?: Date }
): Promise<string> => {
  const id = newId()
  const { takeId, by = 'tomas', state = 'ready', expiresAt = new Date(Date.now() + 3600_000) } = input
  const folder = join(app.storageDir, 'takes', takeId, 'clips')
  mkdirSync(folder, { recursive: true })
  if (state === 'ready') writeFileSync(join(folder, id), 'RIFF')
  await app.db('clips').insert({
    id,
    take_id: takeId,
    user_id: idOf(by),
    settings: JSON.stringify(clipSettings()) as unknown as ClipSettings,
    file_name: 'Take, bars 1-2.wav',
    duration_sec: 2,
    state,
    bytes: state === 'ready' ? 4 : null,
    expires_at: expiresAt
  })
  return id
}

export const clipSettings = (more: Partial<ClipSettings> = {}): ClipSettings => ({
  span: { startSec: 0.5, endSec: 1.5 },
  rate: 0.5,
  semitones: 0,
  aids: plainAids,
  click: null,
  clickLevel: 1,
  countIn: 'none',
  format: 'wav',
  ...more
})

export const buildInvitation = async (
  { db }: Pick<TestApp, 'db'>,
  input: { by?: PersonKey; groupId?: string; role?: Role; expiresAt?: Date } = {}
): Promise<{ id: string; token: string }> => {
  const id = newId()
  const token = randomBytes(32).toString('base64url')
  await db('invitations').insert({
    id,
    group_id: input.groupId ?? demoGroup.id,
    role: input.role ?? 'member',
    note: '',
    token_hash: createHash('sha256').update(token).digest(),
    created_by: idOf(input.by ?? 'mara'),
    expires_at: input.expiresAt ?? new Date(Date.now() + 3600_000)
  })
  return { id, token }
}

export const buildLink = async (
  { db }: Pick<TestApp, 'db'>,
  input: { groupId: string; teacher: PersonKey; student: PersonKey; isAgreed?: boolean }
): Promise<string> => {
  const id = newId()
  await db('teacher_links').insert({
    id,
    group_id: input.groupId,
    teacher_id: idOf(input.teacher),
    student_id: idOf(input.student),
    teacher_agreed_at: new Date(),
    student_agreed_at: input.isAgreed === false ? null : new Date()
  })
  return id
}

export const stoppedTransport: TransportState = {
  revision: 0,
  positionSec: 0,
  rate: 1,
  semitones: 0,
  playing: false,
  loop: null,
  atServerMs: 0
}

export const buildSession = async (
  { db }: Pick<TestApp, 'db'>,
  input: { takeId: string; groupId?: string; by?: PersonKey }
): Promise<string> => {
  const id = newId()
  const by = idOf(input.by ?? 'ines')
  await db('sessions').insert({
    id,
    group_id: input.groupId ?? demoGroup.id,
    take_id: input.takeId,
    started_by: by,
    leader_id: by,
    transport: JSON.stringify(stoppedTransport) as unknown as TransportState
  })
  return id
}

export const buildRecording = async (
  { db }: Pick<TestApp, 'db'>,
  input: { by?: PersonKey; groupId?: string } = {}
): Promise<string> => {
  const id = newId()
  await db('recordings').insert({
    id,
    group_id: input.groupId ?? demoGroup.id,
    uploader_id: idOf(input.by ?? 'ines'),
    mime: 'audio/webm'
  })
  return id
}
