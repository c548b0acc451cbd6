// Reading a recording, beside what ffmpeg alone takes to decode it and to make the same two encodes.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { IngestCost } from './ingest-process.ts'
import { type Cost, runFfmpeg, start } from './processes.ts'
import { alone, compared, type Figure } from './report.ts'
import { type Format, plucks } from './sound.ts'
import { middle } from './statistics.ts'

const minutes = 10

const ingest = async (source: string): Promise<IngestCost> => {
  const running = start('ingest-process.ts', { source })
  try {
    return await running.ask<IngestCost>('ingest')
  } finally {
    await running.stop()
  }
}

/** The same coders and rates as server/media/commands.ts, in one process. */
const aac = ['-map', '0:a:0', '-c:a', 'aac', '-aac_coder', 'fast', '-b:a', '192k', '-movflags', '+faststart']
const opus = ['-map', '0:a:0', '-ar', '48000', '-c:a', 'libopus', '-b:a', '160k', '-compression_level', '5']

const figuresOf = async (format: Format, rounds: number): Promise<Figure[]> => {
  const source = plucks(minutes, format)
  const folder = mkdtempSync(join(tmpdir(), 'plumbline-bench-'))
  const [ours, decode, encode]: [IngestCost[], Cost[], Cost[]] = [[], [], []]
  try {
    for (let round = 0; round < rounds; round += 1) {
      decode.push(await runFfmpeg(['-i', source, '-f', 'null', '-']))
      ours.push(await ingest(source))
      encode.push(await runFfmpeg(['-i', source, ...aac, join(folder, 'bare.m4a'), ...opus, join(folder, 'bare.ogg')]))
    }
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
  const of = (costs: readonly Cost[], key: keyof Cost) => costs.map((cost) => cost[key])
  const pairs = (peer: readonly Cost[], key: keyof Cost) => ({ ours: of(ours, key), peer: of(peer, key) })
  const what = `${minutes} minutes of ${format}, 44.1 kHz stereo; ingest with one decode, AAC, Opus pieces, loudness, true peak, peaks`
  const rest = middle(ours.map((one) => one.restBytes)) / 1e6
  return [
    compared(`${format} to bare decode`, 's', pairs(decode, 'sec'), `${what}; peer: ffmpeg -i X -f null -`),
    compared(
      `${format} to decode + both encodes`,
      's',
      pairs(encode, 'sec'),
      `${what}; peer: the same encodes by one ffmpeg`
    ),
    compared(
      `${format} processor time to decode + both encodes`,
      's',
      pairs(encode, 'cpuSec'),
      `${what}; own and children's processor time from /proc, which other load hardly moves`
    ),
    alone(
      `${format} peak memory of node`,
      'MB',
      middle(ours.map((one) => one.peakBytes)) / 1e6,
      `VmHWM of a process that does nothing else (${Math.round(rest)} MB before it began)`
    )
  ]
}

export const ingestFigures = async (rounds: number): Promise<Figure[]> => {
  const figures: Figure[] = []
  for (const format of ['mp3', 'wav', 'm4a'] as const) figures.push(...(await figuresOf(format, rounds)))
  return figures
}
