// Peaks as the timeline needs them: any stretch of the take at any fineness, from the levels a take was stored with.
import { decodeBuckets, type PeakHeader, type PeakLevel as StoredLevel } from '@shared/audio/peaks'
import type { Sec } from '@shared/units'

/** One zoom of the stored peaks: (min, max) pairs, each over `secPerPair` seconds. */
export interface PeakPairs {
  secPerPair: Sec
  pairs: Float32Array | Int16Array | Int8Array
  /** The number that stands for full scale: 1, 32767, 127. */
  fullScale: number
}

export interface PeaksSource {
  /** Finest first. */
  levels: PeakPairs[]
}

/** The coarsest level that still has a pair for each `secPerPx`, or the finest there is. */
export const levelFor = (peaks: PeaksSource, secPerPx: number): PeakPairs | null => {
  const fineEnough = peaks.levels.filter((level) => level.secPerPair <= secPerPx)
  return fineEnough.at(-1) ?? peaks.levels[0] ?? null
}

/** Lowest and highest sample between two moments, -1..1; silence where there are no peaks. */
export const rangeBetween = (level: PeakPairs, fromSec: Sec, toSec: Sec): { min: number; max: number } => {
  const last = level.pairs.length / 2 - 1
  const first = Math.max(0, Math.floor(fromSec / level.secPerPair))
  const end = Math.min(last, Math.max(first, Math.ceil(toSec / level.secPerPair) - 1))
  if (first > last || end < first) return { min: 0, max: 0 }
  let min = Infinity
  let max = -Infinity
  for (let pair = first; pair <= end; pair += 1) {
    min = Math.min(min, level.pairs[pair * 2] ?? 0)
    max = Math.max(max, level.pairs[pair * 2 + 1] ?? 0)
  }
  return { min: min / level.fullScale, max: max / level.fullScale }
}

/** The loudest sample of a take, 0..1. */
export const loudestOf = (peaks: PeaksSource): number => {
  const level = peaks.levels.at(-1)
  let most = 0
  for (const value of level?.pairs ?? []) most = Math.max(most, Math.abs(value))
  return level ? most / level.fullScale : 0
}

/** Mean height of the peaks in a stretch, 0..1: the ink wash of a bar. */
export const meanHeight = (peaks: PeaksSource, fromSec: Sec, toSec: Sec): number => {
  const level = levelFor(peaks, Math.max((toSec - fromSec) / 32, 0.001))
  if (!level || toSec <= fromSec) return 0
  const first = Math.max(0, Math.floor(fromSec / level.secPerPair))
  const end = Math.min(level.pairs.length / 2, Math.max(first + 1, Math.ceil(toSec / level.secPerPair)))
  let sum = 0
  for (let pair = first; pair < end; pair += 1)
    sum += Math.max(Math.abs(level.pairs[pair * 2] ?? 0), Math.abs(level.pairs[pair * 2 + 1] ?? 0))
  return end > first ? sum / (end - first) / level.fullScale : 0
}

/** One level as stored (shared/audio/peaks.ts), `bytes` being that level whole; both sides of a stereo take under one outline. */
export const pairsFromFile = (header: PeakHeader, level: StoredLevel, bytes: Uint8Array): PeakPairs => {
  const [left = new Float32Array(0), right] = decodeBuckets(bytes, header.channels)
  const pairs = right
    ? left.map((value, n) => (n % 2 ? Math.max(value, right[n] ?? 0) : Math.min(value, right[n] ?? 0)))
    : left
  return { secPerPair: level.samplesPerBucket / header.sampleRate, pairs, fullScale: 1 }
}
