// Recordings for the figures: plucked low notes from ffmpeg's own sources, kept between runs in storage/bench.
import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ingestRecording, type IngestResult, readIngestResult } from '@server/media/ingest'
import { ffmpeg, pluckedBass } from '../support/media.ts'
import { root } from './processes.ts'

const kept = join(root, 'storage', 'bench')

/** Appears whole or not at all. */
const makeOnce = (name: string, args: (minute: string) => string[]): string => {
  const path = join(kept, name)
  if (existsSync(path)) return path
  mkdirSync(kept, { recursive: true })
  const draft = join(kept, `draft-${process.pid}-${name}`)
  ffmpeg(...args(name === minuteName ? '' : minuteOfPlucks()), draft)
  renameSync(draft, path)
  return path
}

const minuteName = 'minute.wav'
/** ffmpeg computes every sample by the formula: a minute of it is played over and over. */
const minuteOfPlucks = (): string => makeOnce(minuteName, () => pluckedBass(60))

export const formats = {
  mp3: ['-c:a', 'libmp3lame', '-b:a', '192k'],
  wav: ['-c:a', 'pcm_s16le'],
  m4a: ['-c:a', 'aac', '-aac_coder', 'fast', '-b:a', '192k'],
  flac: ['-c:a', 'flac']
} as const
export type Format = keyof typeof formats

/** Stereo of 44.1 kHz. */
export const plucks = (minutes: number, format: Format): string =>
  makeOnce(`${minutes}-minutes.${format}`, (minute) => [
    '-stream_loop',
    String(minutes - 1),
    '-i',
    minute,
    ...formats[format]
  ])

/** Another ingest makes other files. */
const ingestMark = (): string => {
  const hash = createHash('sha256')
  for (const folder of ['server/media', 'shared/audio'])
    for (const name of readdirSync(join(root, folder)).sort()) hash.update(readFileSync(join(root, folder, name)))
  return hash.digest('hex').slice(0, 10)
}

export interface LongTake {
  /** Holds rendition, peaks and pieces. */
  folder: string
  result: IngestResult
}

/** A take of an hour, really ingested; made once for every state of the ingest. */
export const longTake = async (minutes: number): Promise<LongTake> => {
  const folder = join(kept, `take-${minutes}-${ingestMark()}`)
  const outDir = join(folder, 'media')
  if (!existsSync(outDir)) {
    const source = plucks(minutes, 'flac')
    for (const name of readdirSync(kept))
      if (name.startsWith('take-')) rmSync(join(kept, name), { recursive: true, force: true })
    mkdirSync(folder, { recursive: true })
    process.stderr.write(`Making a take of ${minutes} minutes, once …\n`)
    const made = await ingestRecording({ source, outDir })
    if (!made.ok) throw new Error(made.error.sentence)
  }
  const result = await readIngestResult(outDir)
  if (!result) throw new Error(`no result in ${outDir}`)
  return { folder: outDir, result }
}
