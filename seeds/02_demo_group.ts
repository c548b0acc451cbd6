// Tunes, takes, bar maps and comments of the demo group, read in the way an uploaded recording is.
import { copyFile, mkdir, readFile } from 'node:fs/promises'
import { createHash } from 'node:crypto'
import { fileURLToPath } from 'node:url'
import { join } from 'node:path'
import type { Knex } from 'knex'
import { chartDocument } from '@shared/music/chart-document'
import { createBarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { ingestRecording } from '@server/media/ingest'
import type { MediaStorage } from '@server/media/storage'
import { demoGroup, personaId } from './01_personas'
import type { DemoComment, DemoTake, DemoTune } from './render/demo-types'

const folder = fileURLToPath(new URL('./demo/', import.meta.url))
const read = async <T>(name: string): Promise<T> => JSON.parse(await readFile(join(folder, name), 'utf8')) as T

export const demoTakes = [
  'slack-tide-ines-second-try',
  'slack-tide-mara-example',
  'ferry-money-tomas-alone',
  'ferry-money-band-rehearsal',
  'quay-lantern-wren-practice',
  'quay-lantern-pell-free-introduction'
] as const

/** The same id for the same thing on every machine, so that links to the demo can be written down (UUID version 8, RFC 9562). */
export const demoId = (name: string): string => {
  const hex = createHash('sha256').update(`plumbline demo ${name}`).digest('hex')
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-8${hex.slice(13, 16)}-a${hex.slice(17, 20)}-${hex.slice(20, 32)}`
}

const hoursBefore = (now: Date, hours: number): Date => new Date(now.getTime() - hours * 3600_000)

const seedTunes = async (trx: Knex): Promise<void> => {
  for (const tune of await read<DemoTune[]>('tunes.json')) {
    await trx('tunes').insert({
      id: demoId(tune.slug),
      group_id: demoGroup.id,
      title: tune.title,
      created_by: personaId('mara')
    })
    await trx('documents').insert({
      id: demoId(`${tune.slug} chart`),
      kind: chartDocument.name,
      tune_id: demoId(tune.slug),
      revision: 0,
      body: JSON.stringify(tune.chart)
    })
  }
}

const seedTake = async (trx: Knex, storage: MediaStorage, slug: string, createdAt: Date): Promise<void> => {
  const take = await read<DemoTake>(`${slug}.json`)
  const id = demoId(slug)
  const paths = storage.ingestPaths(id)
  const copy = join(await storage.incomingFolder(), `demo-${slug}`)
  await mkdir(await storage.incomingFolder(), { recursive: true })
  await copyFile(join(folder, take.file), copy)
  await storage.keepOriginal(id, copy)
  const result = await ingestRecording(paths)
  if (!result.ok) throw new Error(`${take.file}: ${result.error.sentence}`)
  const { durationSec, sampleRate, channels, loudness, tuningCents, rendition, manifest } = result.value
  await trx('takes').insert({
    id,
    group_id: demoGroup.id,
    tune_id: demoId(take.tune),
    uploader_id: personaId(take.player),
    title: take.title,
    reach: take.reach,
    agreed_at: createdAt,
    state: 'ready',
    progress: 1,
    duration_sec: durationSec,
    sample_rate: sampleRate,
    channels,
    loudness_lufs: loudness.integratedLufs,
    true_peak_db: loudness.truePeakDb,
    gain_db: loudness.gainDb,
    tuning_cents: tuningCents,
    original_bytes: take.bytes,
    original_mime: take.mime,
    rendition_mime: rendition.mime,
    manifest: JSON.stringify(manifest) as unknown as object,
    created_at: createdAt
  })
  if (take.named.length > 0)
    await trx('take_names').insert(take.named.map((key) => ({ take_id: id, user_id: personaId(key) })))
  await trx('documents').insert({
    id: demoId(`${slug} bar map`),
    kind: barMapDocument.name,
    take_id: id,
    revision: 0,
    body: JSON.stringify(take.barMap)
  })
}

const seedComments = async (trx: Knex, now: Date): Promise<void> => {
  for (const [index, comment] of (await read<DemoComment[]>('comments.json')).entries()) {
    const map = createBarMap((await read<DemoTake>(`${comment.take}.json`)).barMap)
    if (!map) throw new Error(`${comment.take} has no bar map`)
    const id = demoId(`comment ${index}`)
    const at = hoursBefore(now, comment.agoHours)
    const isSettled = comment.state === 'settled'
    await trx('comments').insert({
      id,
      take_id: demoId(comment.take),
      author_id: personaId(comment.author),
      kind: comment.kind,
      text: comment.text,
      start_sec: map.secAt(comment.from),
      end_sec: map.secAt(comment.to),
      settled_at: isSettled ? hoursBefore(now, comment.settledAgoHours ?? comment.agoHours) : null,
      settled_by: isSettled ? personaId(comment.settledBy ?? comment.author) : null,
      created_at: at,
      updated_at: at
    })
    for (const [place, reply] of comment.replies.entries()) {
      const repliedAt = hoursBefore(now, reply.agoHours)
      await trx('replies').insert({
        id: demoId(`comment ${index} reply ${place}`),
        comment_id: id,
        author_id: personaId(reply.author),
        text: reply.text,
        created_at: repliedAt,
        updated_at: repliedAt
      })
    }
  }
}

export const seedDemoGroup = async (trx: Knex, storage: MediaStorage, now: Date): Promise<void> => {
  await seedTunes(trx)
  for (const [index, slug] of demoTakes.entries()) await seedTake(trx, storage, slug, hoursBefore(now, 54 + index * 20))
  await seedComments(trx, now)
}
