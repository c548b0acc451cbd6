// The peaks of a take as its lanes need them: the coarse zooms first, the finer ones when they have come.
import { useEffect, useState } from 'react'
import { takeRoutes } from '@shared/contracts/takes'
import { addressOf } from '@shared/contracts/route'
import {
  bucketBytes,
  bucketRange,
  decodePeakHeader,
  peakHeaderBytes,
  type ByteRange,
  type PeakHeader,
  type PeakLevel
} from '@shared/audio/peaks'
import { pairsFromFile, type PeakPairs, type PeaksSource } from '@client/timeline/peaks-source'
import { createScope } from '@client/lib/scope'

/** Finer zooms than this many bytes are left out: an hour of stereo at the finest zoom is 5 MB. */
const mostBytes = 12 * 1024 ** 2
/** Which zooms are asked for together, coarse ones first: they lie behind each other at the end of the file. */
export const peakSteps = (header: PeakHeader): PeakLevel[][] => {
  const coarse = header.levels.filter(({ samplesPerBucket }) => samplesPerBucket >= 4096)
  const fine = header.levels
    .filter((level) => !coarse.includes(level) && level.buckets * bucketBytes(header.channels) <= mostBytes)
    .sort((a, b) => b.samplesPerBucket - a.samplesPerBucket)
  return [coarse, ...fine.map((level) => [level])].filter((step) => step.length > 0)
}

const fetchRange = async (url: string, { start, end }: ByteRange, signal: AbortSignal): Promise<Uint8Array> => {
  const response = await fetch(url, { headers: { Range: `bytes=${start}-${end - 1}` }, signal })
  if (!response.ok) throw new Error(`peaks: ${response.status}`)
  const bytes = new Uint8Array(await response.arrayBuffer())
  return response.status === 206 ? bytes : bytes.subarray(start, end)
}

const load = async (url: string, signal: AbortSignal, onMore: (levels: PeakPairs[]) => void): Promise<void> => {
  const decoded = decodePeakHeader(await fetchRange(url, { start: 0, end: peakHeaderBytes }, signal))
  if (!decoded.ok) return
  const header = decoded.value
  let levels: PeakPairs[] = []
  for (const step of peakSteps(header)) {
    const ranges = step.map((level) => bucketRange(header, level))
    const start = Math.min(...ranges.map((range) => range.start))
    const end = Math.max(...ranges.map((range) => range.end))
    if (end <= start) continue
    const bytes = await fetchRange(url, { start, end }, signal)
    const read = step.map((level) => {
      const range = bucketRange(header, level)
      return pairsFromFile(header, level, bytes.subarray(range.start - start, range.end - start))
    })
    levels = [...read, ...levels].sort((a, b) => a.secPerPair - b.secPerPair)
    onMore(levels)
  }
}

/** Null until the first zooms are there; without them the lanes show a plain line, and the sound plays all the same. */
export const usePeaks = (takeId: string, isReady: boolean): PeaksSource | null => {
  const [peaks, setPeaks] = useState<PeaksSource | null>(null)
  useEffect(() => {
    if (!isReady) return undefined
    const scope = createScope()
    const url = addressOf(takeRoutes.peaks, { params: { takeId } })
    let tries = 0
    const attempt = (): void => {
      load(url, scope.signal, (levels) => setPeaks({ levels })).catch(() => {
        tries += 1
        if (!scope.disposed && tries < 6) scope.timeout(attempt, 1000 * 2 ** tries)
      })
    }
    attempt()
    return () => {
      scope.dispose()
      setPeaks(null)
    }
  }, [takeId, isReady])
  return peaks
}
