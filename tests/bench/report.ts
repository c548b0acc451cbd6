// What a figure is, what machine it was got on, and how both are printed.
import { execFileSync } from 'node:child_process'
import { cpus, loadavg, totalmem } from 'node:os'
import { middle, pairRatio, percentile, type Pairs } from './statistics.ts'

export interface Figure {
  name: string
  unit: string
  ours: number
  /** What the same took without us, measured in the same run by turns. */
  peer: number | null
  /** Median of the ratios within pairs where there were pairs, ours by the peer's otherwise. */
  ratio: number | null
  /** How it was got. */
  how: string
  detail?: unknown
}

export interface Measured {
  bench: string
  seconds: number
  load: number
  figures: Figure[]
}

/** Nothing to compare with. */
export const alone = (name: string, unit: string, ours: number, how: string, detail?: unknown): Figure => ({
  name,
  unit,
  ours,
  peer: null,
  ratio: null,
  how,
  ...(detail === undefined ? {} : { detail })
})

/** Medians of both and the median ratio of the pairs. */
export const compared = (name: string, unit: string, pairs: Pairs, how: string, detail?: unknown): Figure => ({
  ...alone(name, unit, middle(pairs.ours), how, detail),
  peer: middle(pairs.peer),
  ratio: pairRatio(pairs)
})

/** The slow end of both; a ratio of percentiles, since no pair belongs to one. */
export const comparedAt = (share: number, name: string, unit: string, pairs: Pairs, how: string): Figure => {
  const ours = percentile(pairs.ours, share)
  const peer = percentile(pairs.peer, share)
  return { ...alone(name, unit, ours, how), peer, ratio: ours / peer }
}

const versionOf = (program: string, flag: string): string => {
  try {
    return execFileSync(program, [flag], { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] }).split('\n')[0] ?? ''
  } catch {
    return 'not there'
  }
}

export const machineFacts = () => ({
  cpu: cpus()[0]?.model ?? 'unknown',
  cores: cpus().length,
  memoryGb: Math.round(totalmem() / 1e9),
  node: process.version,
  ffmpeg: versionOf('ffmpeg', '-version').replace(/ Copyright.*/, ''),
  chromium: versionOf('/usr/bin/chromium', '--version').trim(),
  platform: `${process.platform} ${process.arch}`,
  load: loadavg().map((value) => Math.round(value * 100) / 100)
})

/** Three figures that count, without exponents. */
export const short = (value: number | null): string => {
  if (value === null || Number.isNaN(value)) return '-'
  const size = Math.abs(value)
  return size >= 100 ? Math.round(value).toLocaleString('en') : Number(value.toPrecision(3)).toString()
}

/** One line a figure, columns as wide as what stands in them. */
export const tableOf = (measured: readonly Measured[]): string => {
  const rows = measured.flatMap(({ bench, figures }) =>
    figures.map(({ name, unit, ours, peer, ratio }) => [bench, name, short(ours), short(peer), short(ratio), unit])
  )
  const table = [['bench', 'figure', 'ours', 'peer', 'ratio', 'unit'], ...rows]
  const widths = (table[0] ?? []).map((_, column) => Math.max(...table.map((row) => row[column]?.length ?? 0)))
  const isNumber = (column: number) => column >= 2 && column <= 4
  const line = (row: string[]) =>
    row
      .map((cell, column) => (isNumber(column) ? cell.padStart(widths[column] ?? 0) : cell.padEnd(widths[column] ?? 0)))
      .join('  ')
      .trimEnd()
  return table.map(line).join('\n')
}
