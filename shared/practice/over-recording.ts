// Which moment of a take each recorded frame belongs to, when it was played along with the take in headphones.
import type { Sec } from '@shared/units'

/** Read off the player while it sounds: at this moment of its clock this place of the take is heard. */
export interface HeardPlace {
  clockSec: Sec
  placeSec: Sec
}

/** A stretch of time in which the take ran straight on. */
export interface HeardPass {
  startClockSec: Sec
  endClockSec: Sec
  /** Place of the take at `startClockSec`. */
  placeSec: Sec
  /** Seconds of take in a second. */
  rate: number
}

/** Where the passes begin and (in a loop) end, in seconds of the take. */
export interface PassBounds {
  startSec: Sec
  endSec: Sec | null
}

/** A recording as it lies beside the player's clock. */
export interface CapturedSpan {
  sampleRate: number
  frames: number
  /** What the player's clock showed when the first frame was handed over by the machine. */
  zeroClockSec: Sec
  /** From the player's clock through loudspeaker, ear, hand and microphone into the recording. */
  delaySec: Sec
}

/** One try: a part of the recording, and where it lies along the take. */
export interface TryCut {
  fromFrame: number
  frames: number
  /** Second of the take that belongs to the first frame; below 0 before the take begins. */
  placeSec: Sec
  /** Seconds of take in a second of the recording. */
  rate: number
}

/** What is kept before a pass, for a note that comes early, and after it, for the last one to ring. */
export const leadSec = 0.5
export const tailSec = 1
/** A shorter run-up to a stop is no try. */
export const leastTrySec = 1

/** Readings of a straight run lie on a line; anything farther off belongs to another run. */
const ON_LINE_SEC = 0.002
/** Slower than any engine plays is standing still. */
const LEAST_RATE = 0.1
/** A reading may come this late after a turn, when the page was busy. */
const LATE_SEC = 3

/**
 * The straight runs in a list of readings, rising by clock. Counting in, rests and jumps lie between them. A run needs three
 * readings. With `bounds` each one reaches back to where the passes begin and, if another follows, on to where they end; none
 * reaches beyond.
 */
export const passesIn = (heard: readonly HeardPlace[], bounds: PassBounds): HeardPass[] => {
  const runs: HeardPlace[][] = []
  let run: HeardPlace[] = []
  for (const reading of heard) {
    const last = run.at(-1)
    if (last && reading.clockSec <= last.clockSec) continue
    if (last && !goesOn(run.at(-2), last, reading)) {
      runs.push(run)
      // What came last may be the first of the next run, if it was not part of this one.
      run = run.length === 1 ? [] : isMoving(last, reading) && run.length === 2 ? [last] : []
    }
    run.push(reading)
  }
  runs.push(run)
  const passes = runs.filter(({ length }) => length >= 3).map(passOf)
  return passes.map((pass, index) => reach(pass, bounds, index < passes.length - 1))
}

/** A cut for every pass, with a moment before and after. */
export const cutTries = (passes: readonly HeardPass[], capture: CapturedSpan): TryCut[] => {
  const { sampleRate, frames, zeroClockSec, delaySec } = capture
  const frameOf = (clockSec: Sec): number => (clockSec + delaySec - zeroClockSec) * sampleRate
  return passes.flatMap(({ startClockSec, endClockSec, placeSec, rate }) => {
    if (endClockSec - startClockSec < leastTrySec) return []
    const from = Math.max(0, Math.floor(frameOf(startClockSec) - leadSec * sampleRate))
    const to = Math.min(frames, Math.ceil(frameOf(endClockSec) + tailSec * sampleRate))
    if (to - from < leastTrySec * sampleRate) return []
    const clockAtFrom = from / sampleRate + zeroClockSec - delaySec
    return [{ fromFrame: from, frames: to - from, placeSec: placeSec + (clockAtFrom - startClockSec) * rate, rate }]
  })
}

/** Second of the take that sounded when this frame of the recording was played. */
export const placeOfFrame = ({ fromFrame, placeSec, rate }: TryCut, frame: number, sampleRate: number): Sec =>
  placeSec + ((frame - fromFrame) / sampleRate) * rate

/** The middle one, so that a few readings taken while the page was busy count for nothing. NaN of none. */
export const middleOf = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  if (sorted.length % 2 === 1) return sorted[middle] as number
  return ((sorted[middle - 1] ?? NaN) + (sorted[middle] ?? NaN)) / 2
}

const isMoving = (from: HeardPlace, to: HeardPlace): boolean =>
  (to.placeSec - from.placeSec) / (to.clockSec - from.clockSec) >= LEAST_RATE

const goesOn = (before: HeardPlace | undefined, last: HeardPlace, next: HeardPlace): boolean => {
  if (!isMoving(last, next)) return false
  if (!before) return true
  const rate = (last.placeSec - before.placeSec) / (last.clockSec - before.clockSec)
  return Math.abs(last.placeSec + (next.clockSec - last.clockSec) * rate - next.placeSec) < ON_LINE_SEC
}

const passOf = (run: readonly HeardPlace[]): HeardPass => {
  // The outermost readings may lie a hair outside of it: the line is drawn through those next to them.
  const inner = run.length >= 5 ? run.slice(1, -1) : run
  const [first, last] = [inner[0] as HeardPlace, inner.at(-1) as HeardPlace]
  return {
    startClockSec: first.clockSec,
    endClockSec: (run.at(-1) as HeardPlace).clockSec,
    placeSec: first.placeSec,
    rate: (last.placeSec - first.placeSec) / (last.clockSec - first.clockSec)
  }
}

const reach = (pass: HeardPass, { startSec, endSec }: PassBounds, isFollowed: boolean): HeardPass => {
  const before = (pass.placeSec - startSec) / pass.rate
  const begins =
    before > 0 && before <= LATE_SEC ? { startClockSec: pass.startClockSec - before, placeSec: startSec } : {}
  if (endSec === null) return { ...pass, ...begins }
  const endClockSec = pass.startClockSec + (endSec - pass.placeSec) / pass.rate
  const isLate = endClockSec - pass.endClockSec
  // Followed by another it went on to the end, though nobody looked; the last one may have gone on past it.
  const ends = isFollowed ? isLate > 0 && isLate <= LATE_SEC : isLate < 0
  return { ...pass, ...begins, ...(ends ? { endClockSec } : {}) }
}
