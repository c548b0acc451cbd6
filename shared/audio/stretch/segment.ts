// One stretch of sound between two cuts. It starts as the recording itself (an attack is copied, not stretched) and goes on
// as overlapping frames: each is taken near where the map wants it, at the place most like what was just heard (waveform
// similarity, Verhelst & Roelands 1993, "WSOLA"), and what is left over is turned into phase partial by partial, so that
// every partial goes on where the frame before it had it (phase locking by regions of influence, Laroche & Dolson 1999;
// the angle comes from the frame's true predecessor in the recording, so no frequency has to be estimated).
import { realFft, type RealFft } from '@shared/audio/stretch/fft'
import { angleBetween, eachRegion, powerOf } from '@shared/audio/stretch/regions'
import type { SampleSource } from '@shared/audio/stretch/types'

/** Tables and work space for one window length, shared by all segments of a stretcher. */
export interface Bench {
  size: number
  hop: number
  fft: RealFft
  /** For looking for the likest place: on every `thin`th frame, over two windows. */
  search: RealFft
  thin: number
  window: Float64Array
  synthesis: Float64Array
}

export const createBench = (size: number): Bench => {
  const window = new Float64Array(size).map((_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / size))
  // Four Hann-squared windows over each other make 1.5.
  const synthesis = window.map((one) => one / 1.5)
  const thin = size >= 2048 ? 4 : 1
  return { size, hop: size >> 2, fft: realFft(size), search: realFft((size / thin) * 2), thin, window, synthesis }
}

export interface SegmentPlan {
  bench: Bench
  source: SampleSource
  /** Inner frame and source frame that belong together where it starts. */
  innerAt: number
  sourceAt: number
  /** First inner frame that has to be whole. */
  from: number
  /** Inner frames after `innerAt` that are copied one to one. */
  copied: number
  /**
   * Where a frame centred at the inner frame `centre` should be heading: a later inner frame and the source frame that
   * belongs to it. `isEnd`: the next attack is there, and the sound before it is copied again. Null: not known yet.
   */
  aim(centre: number): { inner: number; source: number; isEnd: boolean } | null
  /** The last frames of what sounds before the cut, one window long; without it nothing is carried over. */
  tail?: readonly Float64Array[] | undefined
}

export interface Segment {
  readonly innerAt: number
  readonly sourceAt: number
  /** Makes everything before `upTo` whole; false when the source has not got it yet. */
  produce(upTo: number): boolean
  /** Adds frames [from, to) times the gain curve into `out` at `offset`. */
  mix(
    out: readonly Float32Array[],
    offset: number,
    from: number,
    to: number,
    gain: ((inner: number) => number) | null
  ): void
  /** The frames that end before `to`, which must be whole. */
  tail(to: number, length: number): Float64Array[]
}

/** A frame may be taken this share of a window before or after its wanted place: half the period of a 31 Hz string. */
const reachShare = 0.2
/** What the farthest place loses against the wanted one, of the best likeness: a dense sound must not jump about. */
const farPenalty = 0.8
/** A region that grows by less than this in energy over the cut is held over. */
const heldRatio = 1.6
/** So much of what sounded before (by amplitude) has to sound on, or it is chance that a partial of the new note lies there. */
const heldShare = 0.25

/**
 * Frames that do not fit each other (noise, breath, cymbals) add up to less than frames that do: four Hann-squared windows
 * of unrelated frames make 0.486 of the power. What is missing is given back. A few bins look a little alike by chance.
 */
const likenessGain = (likeness: number): number => {
  const fit = Math.max(0, (likeness - 0.3) / 0.7)
  return 1 / Math.sqrt(0.486 + 0.514 * fit)
}

/** Means of `by` values each; silence after the last. */
const thinOut = (data: Float64Array, by: number, into: Float64Array) => {
  for (let i = 0; i < into.length; i++) {
    let sum = 0
    for (let j = 0; j < by; j++) sum += data[i * by + j] ?? 0
    into[i] = sum
  }
}

export const createSegment = (plan: SegmentPlan): Segment => {
  const { bench, source, innerAt, sourceAt } = plan
  const { size, hop, fft, search, thin, window, synthesis } = bench
  const half = size >> 1
  const bins = half + 1
  const channels = source.channels

  const made = Array.from({ length: channels }, () => new Float64Array(size * 8))
  /** Start of the next frame's window. */
  let next = plan.from - (size - hop)
  /** Inner frame of made[0]: a window earlier, so that a piece that has just begun has a tail too. */
  let base = next - size
  let isChained = false
  let lastSource = sourceAt
  let lastCentre = innerAt
  let lastWanted = sourceAt
  /** Source frame from which on nothing is heard: there the next attack begins. */
  let edge = Infinity
  /** How much earlier than it should the end is copied, once it is being copied. */
  let endOffset: number | null = null

  const spread = (length: number) => Array.from({ length: channels }, () => new Float64Array(length))
  const spread32 = (length: number) => Array.from({ length: channels }, () => new Float32Array(length))
  const raw = spread32(size)
  const wide = spread32(size * 2)
  const work = new Float64Array(size)
  const wideWork = new Float64Array(size * 2)
  const [yr, yi] = [spread(bins), spread(bins)]
  const [xr, xi] = [spread(bins), spread(bins)]
  const [pr, pi] = [spread(bins), spread(bins)]
  const power = new Float64Array(bins)
  const template = new Float64Array(size * 2)
  const [thinTemplate, thinWide, likeness] = [0, 1, 2].map(() => new Float64Array(search.size)) as [
    Float64Array,
    Float64Array,
    Float64Array
  ]
  const [tr, ti] = [new Float64Array(search.size / 2 + 1), new Float64Array(search.size / 2 + 1)]
  const [sr, si] = [new Float64Array(search.size / 2 + 1), new Float64Array(search.size / 2 + 1)]

  const hushFade = Math.round(source.sampleRate * 0.002)
  /** Silence from `from` on, after a short fade. */
  const hush = (data: readonly Float32Array[], from: number) => {
    for (const one of data) {
      for (let i = Math.max(0, from - hushFade); i < Math.min(one.length, from); i++) {
        one[i] = one[i]! * ((from - i) / hushFade)
      }
      if (from < one.length) one.fill(0, Math.max(0, from))
    }
  }

  const analyse = (centre: number, re: Float64Array[], im: Float64Array[]): boolean => {
    if (!source.read(centre - half, raw)) return false
    if (edge < centre + half) hush(raw, edge - (centre - half))
    for (let c = 0; c < channels; c++) {
      const data = raw[c]!
      for (let i = 0; i < size; i++) work[i] = data[i]! * window[i]!
      fft.forward(work, re[c]!, im[c]!)
    }
    return true
  }

  /** Energy of the windowed frames last read. */
  const energyOfRaw = (): number => {
    let sum = 0
    for (let c = 0; c < channels; c++) {
      const data = raw[c]!
      for (let i = 0; i < size; i++) sum += (data[i]! * window[i]!) ** 2
    }
    return sum
  }
  const energyAt = (centre: number): number | null => (source.read(centre - half, raw) ? energyOfRaw() : null)

  const add = (at: number, channel: number, frame: Float64Array) => {
    const target = made[channel]!
    const offset = at - base
    for (let i = 0; i < size; i++) target[offset + i] = target[offset + i]! + frame[i]! * synthesis[i]!
  }

  const makeRoom = (upTo: number) => {
    const length = made[0]!.length
    if (upTo - base <= length) return
    // What lies more than a window back has been heard.
    const shift = Math.max(0, next - 2 * size - base)
    const needed = upTo - base - shift
    for (let c = 0; c < channels; c++) {
      const old = made[c]!
      const fresh = needed > length ? new Float64Array(Math.max(needed, length * 2)) : old
      fresh.set(old.subarray(shift))
      if (fresh === old) old.fill(0, length - shift)
      made[c] = fresh
    }
    base += shift
  }

  /** The place in [low, high] whose predecessor is most like the last frame. Null: not there yet. */
  const mostAlike = (wanted: number, low: number, high: number): number | null => {
    const count = high - low + 1
    if (count <= 1) return low
    const length = size + count - 1
    const views = wide.map((data) => data.subarray(0, length))
    if (!source.read(low - hop - half, views)) return null
    if (edge < low - hop - half + length) hush(views, edge - (low - hop - half))
    wideWork.fill(0)
    for (const data of views) for (let i = 0; i < length; i++) wideWork[i] = wideWork[i]! + data[i]!
    thinOut(wideWork, thin, thinWide)
    thinOut(template, thin, thinTemplate)
    search.forward(thinTemplate, tr, ti)
    search.forward(thinWide, sr, si)
    // Strong low partials alone must not decide: each bin weighs by the square root of its size (Knapp & Carter 1976,
    // "The generalized correlation method", between plain correlation and phase transform).
    for (let k = 0; k < tr.length; k++) {
      const weight = 1 / Math.sqrt(Math.sqrt(tr[k]! * tr[k]! + ti[k]! * ti[k]! + 1e-12))
      const r = (sr[k]! * tr[k]! + si[k]! * ti[k]!) * weight
      si[k] = (si[k]! * tr[k]! - sr[k]! * ti[k]!) * weight
      sr[k] = r
    }
    search.inverse(sr, si, likeness)
    // Energy of each candidate, by a running sum.
    const [steps, span] = [Math.ceil(count / thin), size / thin]
    let energy = 1e-12
    for (let i = 0; i < span; i++) energy += thinWide[i]! * thinWide[i]!
    const first = energy
    let top = 1e-12
    for (let d = 0; d < steps; d++) top = Math.max(top, Math.abs(likeness[d]!))
    let best = 0
    let bestScore = -Infinity
    const scale = (high - low) / 2 || 1
    for (let d = 0; d < steps; d++) {
      const off = (low + d * thin - wanted) / scale
      const score = (likeness[d]! / top) * Math.sqrt(first / energy) - farPenalty * off * off
      if (score > bestScore) {
        bestScore = score
        best = d * thin
      }
      const out = thinWide[d]!
      const into = thinWide[d + span]!
      energy = Math.max(1e-12, energy + into * into - out * out)
    }
    return low + (thin === 1 ? best : nearby(best, count))
  }

  /** The likest of the candidates between the thinned ones. */
  const nearby = (coarse: number, count: number): number => {
    let best = coarse
    let most = -Infinity
    for (let d = Math.max(0, coarse - thin + 1); d < Math.min(count, coarse + thin); d++) {
      let sum = 0
      for (let i = 0; i < size; i++) sum += template[i]! * wideWork[d + i]!
      if (sum > most) {
        most = sum
        best = d
      }
    }
    return best
  }

  /** Turns the frame in xr, xi so that each region goes on where the last frame had it. */
  const turn = () => {
    powerOf(xr, xi, power)
    eachRegion(power, (start, end) => {
      const [ur, ui, length] = angleBetween(yr, yi, pr, pi, start, end)
      const gain = likenessGain(likenessOf(length, start, end))
      turnRegion(start, end, ur * gain, ui * gain)
    })
  }

  /** How alike the last frame and the true predecessor are over a region, 0-1. */
  const likenessOf = (length: number, start: number, end: number): number => {
    let [mine, theirs] = [1e-30, 1e-30]
    for (let c = 0; c < channels; c++) {
      const [lr, li, qr, qi] = [yr[c]!, yi[c]!, pr[c]!, pi[c]!]
      for (let b = start; b < end; b++) {
        mine += lr[b]! * lr[b]! + li[b]! * li[b]!
        theirs += qr[b]! * qr[b]! + qi[b]! * qi[b]!
      }
    }
    return Math.min(1, length / Math.sqrt(mine * theirs))
  }

  const turnRegion = (start: number, end: number, ur: number, ui: number) => {
    for (let c = 0; c < channels; c++) {
      const [ar, ai, br, bi] = [xr[c]!, xi[c]!, yr[c]!, yi[c]!]
      for (let b = start; b < end; b++) {
        br[b] = ar[b]! * ur - ai[b]! * ui
        bi[b] = ar[b]! * ui + ai[b]! * ur
      }
    }
  }

  /**
   * What sounds on through the cut (a held chord under a new bass note) must not be put back to the recording's phase: its
   * regions are turned to where the piece before has brought them. Null when nothing has to be.
   */
  const heldOver = (tail: readonly Float64Array[]): { start: number; end: number; ur: number; ui: number }[] | null => {
    for (let c = 0; c < channels; c++) {
      const data = tail[c]!
      for (let i = 0; i < size; i++) work[i] = data[i]! * window[i]!
      fft.forward(work, yr[c]!, yi[c]!)
    }
    if (!analyse(sourceAt - half, pr, pi) || !analyse(sourceAt + half, xr, xi)) return null
    const before = new Float64Array(bins)
    powerOf(pr, pi, before)
    powerOf(xr, xi, power)
    const held: { start: number; end: number; ur: number; ui: number }[] = []
    let whole = 0
    let kept = 0
    eachRegion(before, (start, end) => {
      let peak = start
      for (let b = start; b < end; b++) if (before[b]! > before[peak]!) peak = b
      let early = 0
      let late = 0
      for (let b = Math.max(0, peak - 1); b <= Math.min(bins - 1, peak + 1); b++) {
        early += before[b]!
        late += power[b]!
      }
      whole += Math.sqrt(early)
      if (late > heldRatio * early || late < early / 8 || early <= 0) return
      kept += Math.sqrt(early)
      const [ur, ui] = angleBetween(yr, yi, pr, pi, start, end)
      let from = peak
      let to = peak + 1
      while (from > start && power[from - 1]! <= 8 * before[from - 1]!) from--
      while (to < end && power[to]! <= 8 * before[to]!) to++
      held.push({ start: from, end: to, ur, ui })
    })
    return kept > heldShare * whole ? held : null
  }

  const copyFrame = (at: number): boolean => {
    const from = sourceAt + (at - innerAt)
    if (held.length > 0) {
      if (!analyse(from + half, xr, xi)) return false
      turnRegion(0, bins, 1, 0)
      for (const { start, end, ur, ui } of held) turnRegion(start, end, ur, ui)
      sound(at)
    } else {
      if (!source.read(from, raw)) return false
      makeRoom(at + size)
      template.fill(0)
      for (let c = 0; c < channels; c++) {
        const data = raw[c]!
        for (let i = 0; i < size; i++) {
          work[i] = data[i]! * window[i]!
          template[i] = template[i]! + work[i]!
        }
        add(at, c, work)
      }
    }
    lastSource = from + half
    lastCentre = at + half
    lastWanted = lastSource
    isChained = held.length > 0
    return true
  }

  /** Puts the frame in yr, yi into place. */
  const sound = (at: number) => {
    makeRoom(at + size)
    template.fill(0)
    for (let c = 0; c < channels; c++) {
      fft.inverse(yr[c]!, yi[c]!, work)
      for (let i = 0; i < size; i++) template[i] = template[i]! + work[i]!
      add(at, c, work)
    }
  }

  /** Where the map wants the frame after the last one, and how far its place may be moved either way. */
  const whereNext = (centre: number): { wanted: number; low: number; high: number } | null => {
    const aim = plan.aim(centre)
    if (!aim) return null
    const reach = Math.round(size * reachShare)
    edge = aim.isEnd ? aim.source : Infinity
    if (aim.isEnd && centre >= aim.inner - half) {
      // The end is copied like the beginning, early rather than late, so that it meets the attack without a gap.
      const ending = aim.source - Math.round(aim.inner - centre)
      if (endOffset !== null) return { wanted: ending + endOffset, low: ending + endOffset, high: ending + endOffset }
      return { wanted: ending, low: Math.max(sourceAt + plan.copied, ending - 2 * reach), high: ending }
    }
    endOffset = null
    const [toInner, toSource] = aim.isEnd ? [aim.inner - half, aim.source - half] : [aim.inner, aim.source]
    const share = Math.min(1, (centre - lastCentre) / Math.max(1, toInner - lastCentre))
    const wanted = lastWanted + share * (toSource - lastWanted)
    const high = Math.min(Math.round(wanted + reach), edge - half)
    const lowest = Math.min(sourceAt + plan.copied, high)
    return { wanted, high, low: Math.max(lowest, Math.min(Math.round(wanted - reach), high), high - 2 * reach) }
  }

  const turnedFrame = (at: number): boolean => {
    const centre = at + half
    if (!isChained) {
      // The last frame was a copy: its spectrum is the recording's there.
      edge = Infinity
      if (!analyse(lastSource, yr, yi)) return false
    }
    const where = whereNext(centre)
    if (!where) return false
    const { wanted, low, high } = where
    const best = mostAlike(wanted, low, high)
    if (best === null || !analyse(best - hop, pr, pi)) return false
    // A sound that dies quickly must not flicker where the likest place lies before or after the wanted one.
    const due = Math.max(low, Math.min(Math.round(wanted), high))
    const level = due === best || endOffset !== null ? null : energyAt(due)
    if (!analyse(best, xr, xi)) return false
    turn()
    if (level !== null) {
      const gain = Math.max(0.5, Math.min(2, Math.sqrt((level + 1e-12) / (energyOfRaw() + 1e-12))))
      for (let c = 0; c < channels; c++) {
        for (let k = 0; k < bins; k++) {
          yr[c]![k] = yr[c]![k]! * gain
          yi[c]![k] = yi[c]![k]! * gain
        }
      }
    }
    sound(at)
    const aim = plan.aim(centre)
    if (aim?.isEnd && centre >= aim.inner - half && endOffset === null)
      endOffset = best - (aim.source - Math.round(aim.inner - centre))
    lastSource = best
    lastCentre = centre
    lastWanted = wanted
    isChained = true
    return true
  }

  const held = plan.tail ? (heldOver(plan.tail) ?? []) : []

  return {
    innerAt,
    sourceAt,
    tail: (to, length) => made.map((data) => data.slice(to - base - length, to - base)),
    produce: (upTo) => {
      while (next < upTo) {
        const isCopy = next + half <= innerAt + plan.copied
        if (!(isCopy ? copyFrame(next) : turnedFrame(next))) return false
        next += hop
      }
      return true
    },
    mix: (out, offset, from, to, gain) => {
      for (let c = 0; c < channels; c++) {
        const data = made[c]!
        const target = out[c]!
        for (let i = from; i < to; i++) {
          const value = data[i - base]!
          target[offset + i - from] = target[offset + i - from]! + (gain ? value * gain(i) : value)
        }
      }
    }
  }
}
