// Slower, faster, higher, lower, without detuning or smearing: the recording is cut just before each attack; every piece is
// placed where the map wants its attack, begins as an exact copy, and is stretched only after the attack (segment.ts). The
// idea of leaving transients as they are and stretching what lies between is Bonada's (2000, "Automatic technique in
// frequency domain for near-lossless time-scale modification of audio"); shifting pitch is stretching by more and reading
// the result faster or slower (resampler.ts). At speed 1 and ratio 1 the recording itself goes out, bit for bit.
import { createBench, createSegment, type Segment } from '@shared/audio/stretch/segment'
import { createOnsetFinder, type Onset } from '@shared/audio/stretch/onsets'
import { kernelReach, readAt } from '@shared/audio/stretch/resampler'
import type { Leg, SampleSource, Stretcher } from '@shared/audio/stretch/types'

/** Fade from one piece to the next, seconds; a change between the recording itself and its stretched form takes longer. */
const cutFadeSec = 0.003
const modeFadeSec = 0.012
/** Work is done in blocks of this many inner frames. */
const blockFrames = 256
/** A stretched piece that ran ahead (its attack was copied at full speed) comes back to the map within about this time. */
const catchUpSec = 0.45
/** Attacks closer than this make one. */
const leastApartSec = 0.02
/** How far ahead a piece looks for the next attack when it chooses its window, seconds of source. */
const lookSec = 0.6

interface InnerLeg extends Leg {
  /** Inner frame at which it begins. */
  inner: number
  isJump: boolean
}

interface Cut {
  inner: number
  source: number
  kind: 'attack' | 'jump' | 'silence' | 'mode'
}

interface Piece {
  cut: Cut
  fade: number
  segment: Segment | null
  /** The recording itself, from `cut.source` on. */
  isPlain: boolean
  copied: number
}

const isPlainLeg = (leg: Leg): boolean => leg.speed === 1 && leg.ratio === 1

export const createStretcher = (source: SampleSource): Stretcher => {
  const { sampleRate, channels } = source
  const size = 2 ** Math.round(Math.log2(sampleRate * 0.09))
  const benches = [size << 1, size, size >> 1, size >> 2, size >> 3].map(createBench)
  const finder = createOnsetFinder(source)
  const cutFade = Math.round(cutFadeSec * sampleRate)
  const modeFade = Math.round(modeFadeSec * sampleRate)

  const legs: InnerLeg[] = []
  /** Device frames rendered, inner frames mixed, and inner place of the next device frame. */
  let outFrame = 0
  let innerFrame = 0
  let piece: Piece | null = null
  let coming: Piece | null = null

  /** Mixed inner frames not yet read by the resampler; stock[0] is inner frame `stockBase`. */
  let stock = Array.from({ length: channels }, () => new Float32Array(blockFrames * 8))
  let stockBase = 0

  const legAtInner = (inner: number): InnerLeg | null => {
    for (let i = legs.length - 1; i >= 0; i--) if (legs[i]!.inner <= inner) return legs[i]!
    return legs[0] ?? null
  }
  const legAtOut = (out: number): InnerLeg | null => {
    for (let i = legs.length - 1; i >= 0; i--) if (legs[i]!.outFrame <= out) return legs[i]!
    return legs[0] ?? null
  }
  const innerAtOut = (out: number): number => {
    const leg = legAtOut(out)
    return leg ? leg.inner + (out - leg.outFrame) * leg.ratio : out
  }
  const sourceAtInner = (inner: number): number => {
    const leg = legAtInner(inner)
    if (!leg) return 0
    if (leg.isSilent) return leg.sourceFrame
    return leg.sourceFrame + ((inner - leg.inner) / leg.ratio) * leg.speed
  }

  const schedule = (leg: Leg) => {
    while (legs.length > 0 && legs.at(-1)!.outFrame >= leg.outFrame) legs.pop()
    const before = legs.at(-1)
    const inner = before ? before.inner + (leg.outFrame - before.outFrame) * before.ratio : innerFrame
    const arrived = before
      ? before.sourceFrame + (before.isSilent ? 0 : (leg.outFrame - before.outFrame) * before.speed)
      : NaN
    const isJump = !before || before.isSilent !== leg.isSilent || Math.abs(arrived - leg.sourceFrame) > 0.5
    legs.push({ ...leg, inner, isJump })
    // What was planned by the old legs is planned anew, unless it is already sounding.
    if (coming && coming.cut.inner - coming.fade > innerFrame) coming = null
    while (legs.length > 1 && legs[1]!.outFrame <= outFrame && legs[1]!.inner < innerFrame - sampleRate) legs.shift()
  }

  /** Inner frame by which the anchor of an onset has to sound, in the leg that is on at `after`. */
  const innerOfOnset = (onset: Onset, after: number): number | null => {
    const leg = legAtInner(after)
    if (!leg || leg.isSilent || leg.speed <= 0) return null
    const at = leg.inner + ((onset.anchor - leg.sourceFrame) / leg.speed) * leg.ratio
    return Math.round(at - (onset.anchor - onset.cut))
  }

  /** The next cut after the piece now sounding; 'wait' when the source has not got what it takes to know. */
  const nextCut = (now: Piece): Cut | null | 'wait' => {
    const from = Math.max(innerFrame, now.cut.inner + 1)
    let jump: Cut | null = null
    for (const leg of legs) {
      const inner = Math.round(leg.inner)
      if (inner < from) continue
      const wasPlain = isPlainLeg(legAtInner(leg.inner - 1e-6) ?? leg)
      if (leg.isJump || (now.isPlain && !isPlainLeg(leg)) || (!wasPlain && isPlainLeg(leg))) {
        const kind = leg.isSilent ? 'silence' : leg.isJump ? 'jump' : 'mode'
        jump = { inner, source: Math.round(leg.sourceFrame), kind }
        break
      }
    }
    if (now.isPlain || !now.segment) return jump
    const next = following(now)
    if (next === 'wait') return 'wait'
    if (next && (!jump || next.inner < jump.inner - cutFade)) return { ...next, kind: 'attack' }
    return jump
  }

  /** The attack that ends a piece, and the inner frame at which it has to begin. */
  const following = (one: Pick<Piece, 'cut'>): { inner: number; source: number } | null | 'wait' => {
    const here = Math.max(one.cut.inner, innerFrame)
    const first = one.cut.source + Math.round(leastApartSec * sampleRate)
    const onsets = finder.between(first, Math.max(first, Math.ceil(sourceAtInner(here) + lookSec * sampleRate)))
    if (!onsets) return 'wait'
    const earliest = Math.max(one.cut.inner + Math.round(0.012 * sampleRate), innerFrame + cutFade)
    const leg = legAtInner(here)
    const isFaster = leg !== null && leg.speed >= leg.ratio
    for (const onset of onsets) {
      // Played faster, a release has no room of its own before the next attack.
      if (onset.isEnd && isFaster) continue
      const inner = innerOfOnset(onset, here)
      if (inner !== null && inner >= earliest) return { inner, source: onset.cut }
    }
    return null
  }

  /** What the piece now sounding gives just before the inner frame `to`; undefined when it has not got it. */
  const tailOf = (one: Piece, to: number, length: number): Float64Array[] | undefined =>
    one.segment?.produce(to) ? one.segment.tail(to, length) : undefined

  const open = (cut: Cut): Piece | 'wait' => {
    const leg = legAtInner(cut.inner + 1e-6)
    const fade = cut.kind === 'mode' ? modeFade : cutFade
    if (!leg || leg.isSilent) return { cut, fade, segment: null, isPlain: false, copied: 0 }
    if (isPlainLeg(leg)) return { cut, fade, segment: null, isPlain: true, copied: 0 }
    // How far the attack reaches that this piece starts with or just after.
    const onsets = finder.between(cut.source - size, cut.source + Math.round(sampleRate * lookSec))
    if (!onsets) return 'wait'
    const attack =
      cut.kind === 'attack' ? cut.source : onsets.filter((one) => !one.isEnd && one.cut <= cut.source).at(-1)?.cut
    const next = following({ cut })
    if (next === 'wait') return 'wait'
    const inner = cut.inner
    const room = next ? Math.min(next.source - cut.source, next.inner - inner) : Infinity
    const bench = benches.find((one) => one.size * (one.size > size ? 3 : 1.05) <= room) ?? benches.at(-1)!
    const half = bench.size >> 1
    const longest = Math.max(0.75 * half, Math.min(half + bench.hop, room - bench.size))
    const copied = Math.max(0, Math.round(attack === undefined ? 0 : attack + longest - cut.source))
    const segment = createSegment({
      bench,
      source,
      innerAt: inner,
      sourceAt: cut.source,
      from: inner - fade,
      copied,
      tail: cut.kind === 'attack' && piece ? tailOf(piece, inner, bench.size) : undefined,
      aim: (centre) => {
        const end = following({ cut })
        if (end === 'wait') return null
        if (end) return { ...end, isEnd: true }
        const ahead = centre + Math.round(catchUpSec * sampleRate)
        return { inner: ahead, source: sourceAtInner(ahead), isEnd: false }
      }
    })
    return { cut, fade, segment, isPlain: false, copied }
  }

  const plainRaw = Array.from({ length: channels }, () => new Float32Array(blockFrames))

  const mixPiece = (
    one: Piece,
    out: readonly Float32Array[],
    offset: number,
    from: number,
    to: number,
    gain: ((inner: number) => number) | null
  ): boolean => {
    if (to <= from) return true
    if (one.segment) {
      if (!one.segment.produce(to)) return false
      one.segment.mix(out, offset, from, to, gain)
      return true
    }
    if (!one.isPlain) return true
    const views = plainRaw.map((data) => data.subarray(0, to - from))
    if (!source.read(one.cut.source + from - one.cut.inner, views)) return false
    for (let c = 0; c < channels; c++) {
      const target = out[c]!
      const data = views[c]!
      for (let i = from; i < to; i++) {
        const value = data[i - from]!
        target[offset + i - from] = target[offset + i - from]! + (gain ? value * gain(i) : value)
      }
    }
    return true
  }

  /** Mixes the next block of inner frames into the stock; false when the source has not got it yet. */
  const mixBlock = (): boolean => {
    const leg = legAtInner(innerFrame)
    if (!leg) return false
    if (!piece) {
      const first = open({
        inner: innerFrame,
        source: Math.round(sourceAtInner(innerFrame)),
        kind: leg.isSilent ? 'silence' : 'jump'
      })
      if (first === 'wait') return false
      piece = first
    }
    if (!coming) {
      const cut = nextCut(piece)
      if (cut === 'wait') return false
      if (cut && cut.inner - modeFade < innerFrame + blockFrames) {
        const next = open(cut)
        if (next === 'wait') return false
        coming = next
      }
    }
    const from = innerFrame
    let to = from + blockFrames
    if (coming) {
      const fadeStart = Math.max(from, coming.cut.inner - coming.fade)
      to = from < fadeStart ? Math.min(to, fadeStart) : Math.min(to, coming.cut.inner)
    }
    const isFading = coming !== null && from >= coming.cut.inner - coming.fade && to <= coming.cut.inner
    if (to > from) {
      makeStock(to)
      const offset = from - stockBase
      for (let c = 0; c < channels; c++) stock[c]!.fill(0, offset, offset + to - from)
      if (isFading && coming) {
        const { fade, cut } = coming
        const rising = (i: number) => (i - (cut.inner - fade) + 0.5) / fade
        if (!mixPiece(piece, stock, offset, from, to, (i) => 1 - rising(i))) return false
        for (let c = 0; c < channels; c++) scratch[c]!.fill(0, 0, to - from)
        if (!mixPiece(coming, scratch, 0, from, to, rising)) {
          for (let c = 0; c < channels; c++) stock[c]!.fill(0, offset, offset + to - from)
          return false
        }
        for (let c = 0; c < channels; c++) {
          for (let i = 0; i < to - from; i++) stock[c]![offset + i] = stock[c]![offset + i]! + scratch[c]![i]!
        }
      } else if (!mixPiece(piece, stock, offset, from, to, null)) return false
    }
    innerFrame = to
    if (coming && innerFrame >= coming.cut.inner) {
      piece = coming
      coming = null
    }
    return true
  }
  const scratch = Array.from({ length: channels }, () => new Float32Array(Math.max(blockFrames, modeFade)))

  const makeStock = (upTo: number) => {
    if (upTo - stockBase <= stock[0]!.length) return
    const keepFrom = Math.max(stockBase, Math.floor(innerAtOut(outFrame)) - 256)
    const length = Math.max(stock[0]!.length, 2 * (upTo - keepFrom))
    stock = stock.map((old) => {
      const fresh = new Float32Array(length)
      fresh.set(old.subarray(keepFrom - stockBase, innerFrame - stockBase))
      return fresh
    })
    stockBase = keepFrom
  }

  return {
    get outFrame() {
      return outFrame
    },
    reach: { before: finder.reach + 4 * size, after: finder.reach + Math.round(lookSec * sampleRate) + 6 * size },
    schedule,
    prepare: (sourceFrame) =>
      finder.prepare(sourceFrame - 2 * size, sourceFrame + Math.round(lookSec * sampleRate) + 2 * size),
    sourceFrameAt: (out) => {
      const leg = legAtOut(out)
      if (!leg) return 0
      return leg.sourceFrame + (leg.isSilent ? 0 : (out - leg.outFrame) * leg.speed)
    },
    render: (out, offset, frames) => {
      for (let done = 0; done < frames; done++) {
        const leg = legAtOut(outFrame)
        if (!leg) return done
        const at = leg.inner + (outFrame - leg.outFrame) * leg.ratio
        const isCopy = leg.ratio === 1
        const reach = isCopy ? 0 : kernelReach(leg.ratio)
        while (innerFrame <= at + reach) if (!mixBlock()) return done
        const place = at - stockBase
        for (let c = 0; c < channels; c++) {
          const data = stock[c]!
          out[c]![offset + done] = isCopy
            ? data[Math.round(place)]!
            : place < reach
              ? 0
              : readAt(data, place, leg.ratio)
        }
        outFrame++
      }
      return frames
    }
  }
}
