// Everything between the pieces of a take and the loudspeaker, in one place that runs in the worklet and in Node alike.
import type { Aids } from '../listening.ts'
import { createAidsChain } from '../aids/aids-chain.ts'
import { createLimiter } from '../aids/limiter.ts'
import { createRamp } from '../aids/ramp.ts'
import { createClickVoice } from '../click-voice.ts'
import { createStretcher } from '../stretch/stretcher.ts'
import type { SampleSource, Stretcher } from '../stretch/types.ts'
import { createEnvelope } from './envelope.ts'
import type { PageStore } from './page-store.ts'
import { createPlan, legOf, partAt, placeIn } from './plan.ts'
import type { PlanCommand, PlanPart, PlanSettings } from './plan-types.ts'
import { startPart } from './start-part.ts'
import { strikePart, type FrameClick } from './strikes.ts'

/** Volume and click level move this slowly. */
const rampSec = 0.03
/** The plan is thought out this far ahead: longer than any fade. */
const aheadSec = 2.5
/** After a stop what still rings (fades, filters, clicks, the limiter) is over by then, and nothing is worked out any more. */
const ringSec = 0.5
/** Sounding on after a want of frames waits until so much is there. */
const feedSec = 0.5
/**
 * Stretched frames that may be mixed ahead already, and the longest fade into what comes: a change can take effect no
 * sooner. Counted before the pitch is shifted.
 */
const settleFrames = 1000

/** What passing samples on as they are looks at; stretching them looks much farther (`Stretcher.reach`). */
const plainReach = { before: 2000, after: 4000 }

export interface PlaybackSetup {
  source: PageStore
  settings: PlanSettings
  sourceFrame: number
  makeStretcher?: (source: SampleSource) => Stretcher
}

/** The plan's parts that are new, replacing everything told before from a frame on; and the parts that have begun. */
export interface PlaybackNews {
  plan: { fromFrame: number; parts: PlanPart[] } | null
  begun: PlanPart[]
}

/**
 * Renders a take by commands. Frames are counted from the first one rendered; a sample leaves `delayFrames` after the frame
 * that the plan gives it. Speed and pitch, then the loop's fades, channel and low focus with the loudness gain, then the
 * clicks on top, the volume, and the limiter last.
 */
export const createPlayback = ({ source, settings, sourceFrame, makeStretcher = createStretcher }: PlaybackSetup) => {
  const { sampleRate, channels } = source
  const plan = createPlan(source.frames, startPart(settings, sourceFrame))
  const chain = createAidsChain(sampleRate, channels)
  const limiter = createLimiter(sampleRate, { channels })
  const envelope = createEnvelope()
  const voice = createClickVoice(sampleRate)
  const volume = createRamp(0, rampSec * sampleRate)
  let clicks: readonly FrameClick[] = []
  let clickLevel = 1
  let stretcher = makeStretcher(source)
  /** Output frames in which the stretcher was not asked for any. */
  let shift = 0
  /** It has run dry in the middle of its work and is made afresh. */
  let isBroken = false
  let frame = 0
  let untold: PlaybackNews = { plan: null, begun: [] }

  const partsNow = (): readonly PlanPart[] => plan.until(frame + Math.round(aheadSec * sampleRate))
  const settleTime = (part: PlanPart): number => Math.ceil(settleFrames / Math.min(1, part.settings.ratio))

  const sync = (): void => {
    partsNow()
    const news = plan.news()
    if (!news) return
    for (const part of news.parts)
      if (part.outFrame - shift >= stretcher.outFrame) stretcher.schedule(legOf(part, shift))
    const before = untold.plan?.parts.filter((part) => part.outFrame < news.fromFrame) ?? []
    const fromFrame = Math.min(news.fromFrame, untold.plan?.fromFrame ?? Infinity)
    untold = { ...untold, plan: { fromFrame, parts: [...before, ...news.parts] } }
  }
  /** From here on the stretcher works again, on the plan as it is now. */
  const wake = (): void => {
    const isFresh = isBroken
    if (isFresh) stretcher = makeStretcher(source)
    isBroken = false
    shift = frame - stretcher.outFrame
    const parts = partsNow()
    const now = partAt(parts, frame)
    // What it has mixed ahead already sounds on for a moment when it is woken in the middle of a pass.
    const from = now.mode === 'playing' && !isFresh ? frame + settleTime(now) : frame
    const first = partAt(parts, from)
    stretcher.schedule(legOf({ ...first, outFrame: from, sourceFrame: placeIn(first, from) }, shift))
    for (const part of parts) if (part.outFrame > from) stretcher.schedule(legOf(part, shift))
  }
  let isAsleep = true

  const isThere = (part: PlanPart, place: number, moreFrames: number): boolean => {
    const isPlain = part.speed === 1 && part.settings.ratio === 1
    const { before, after } = isPlain ? plainReach : stretcher.reach
    return source.has(place - before, place + after + moreFrames * part.speed)
  }
  /** Looks at what will sound as soon as anything can be changed, and stops or goes on by what is there. */
  const watchStock = (): void => {
    const parts = partsNow()
    const at = frame + settleTime(partAt(parts, frame))
    const part = partAt(parts, at)
    const place = placeIn(part, at)
    if (part.mode === 'playing' && !isThere(part, place, 256)) plan.give({ kind: 'starve' }, at)
    else if (part.mode === 'waiting') {
      const speed = part.settings.rate
      if (isThere({ ...part, speed }, place, feedSec * sampleRate)) plan.give({ kind: 'feed' }, at)
    } else return
    sync()
  }

  /** A little of the work that the next starts and turns take, so that none of them takes it all at once. */
  const prepareAhead = (parts: readonly PlanPart[]): void => {
    const part = partAt(parts, frame)
    const { rate, trim, ratio, loop } = part.settings
    if (rate * trim === 1 && ratio === 1 && !loop?.ladder) return
    const place = placeIn(part, frame)
    if (!stretcher.prepare(place) || (loop && !stretcher.prepare(loop.startFrame))) return
    stretcher.prepare(place + sampleRate)
  }

  const noteBegun = (to: number): void => {
    untold.begun.push(...partsNow().filter(({ outFrame }) => outFrame >= frame && outFrame < to))
  }
  const canSleep = (parts: readonly PlanPart[]): boolean => {
    const now = partAt(parts, frame)
    const isStill = now.mode === 'stopped' || now.mode === 'waiting'
    const next = parts.find((part) => part.outFrame > frame)
    return (
      isStill && frame > now.outFrame + ringSec * sampleRate && (!next || next.outFrame > frame + 2 * settleTime(now))
    )
  }

  const renderBlock = (out: readonly Float32Array[], frames: number): void => {
    watchStock()
    const parts = partsNow()
    const sleeps = canSleep(parts)
    if (!sleeps && isAsleep) wake()
    isAsleep = sleeps
    for (const channel of out) channel.fill(0, 0, frames)
    if (!sleeps && !isBroken) {
      const done = stretcher.render(out, 0, frames)
      if (done < frames) {
        // Should not happen: the stock is watched ahead. Silence, and a fresh start when the frames are there.
        isBroken = true
        for (const channel of out) channel.fill(0, done, frames)
        plan.give({ kind: 'starve' }, frame + frames)
        sync()
      }
    }
    prepareAhead(parts)
    envelope(parts, out, frame, frames)
    chain.process(out, 0, frames)
    parts.forEach((part, index) => {
      const end = parts[index + 1]?.outFrame ?? Infinity
      if (part.outFrame < frame + frames && end > frame)
        strikePart(part, clicks, frame, frame + frames, end, (at, accent) => voice.strike(at, accent))
    })
    voice.mixInto(out, frame, frames, clickLevel)
    for (let at = 0; at < frames; at += 1) {
      const factor = volume.next()
      if (factor !== 1) for (const channel of out) channel[at] = (channel[at] ?? 0) * factor
    }
    limiter.process(out, 0, frames)
    noteBegun(frame + frames)
    frame += frames
    if (isBroken) isAsleep = true
    plan.forget(frame - sampleRate)
  }

  return {
    channels,
    delayFrames: limiter.delayFrames,
    /** The next frame of the plan to be rendered. */
    get frame() {
      return frame
    },
    /** From `atFrame` on, or as soon as it can be done without a click. Gives the frame it takes effect at. */
    command: (command: PlanCommand, atFrame?: number): number => {
      const soonest = frame + settleTime(partAt(partsNow(), frame))
      const at = Math.max(soonest, Math.round(atFrame ?? soonest))
      const lateFrames = atFrame === undefined ? 0 : at - Math.round(atFrame)
      const canMakeUp = lateFrames > 0 && (command.kind === 'play' || command.kind === 'seek')
      plan.give(canMakeUp ? { ...command, lateFrames } : command, at)
      sync()
      return at
    },
    setAids: (aids: Aids, gainDb: number): void => chain.set(aids, gainDb),
    /** Linear. The first one holds at once. */
    setVolume: (gain: number): void => (frame === 0 ? volume.jump(gain) : volume.set(gain)),
    setClicks: (next: readonly FrameClick[] | null, level: number): void => {
      clicks = next ?? []
      clickLevel = level
    },
    /** Renders the next frames into the arrays, one a channel. */
    process: (out: readonly Float32Array[], frames: number): void => renderBlock(out, frames),
    /** The device has let some frames go by without asking for them: the plan goes on as if they had been heard. */
    skip: (frames: number): void => {
      sync()
      noteBegun(frame + frames)
      frame += frames
      isAsleep = true
    },
    /** What has happened since the last asking. */
    news: (): PlaybackNews | null => {
      sync()
      if (!untold.plan && untold.begun.length === 0) return null
      const told = untold
      untold = { plan: null, begun: [] }
      return told
    }
  }
}
export type Playback = ReturnType<typeof createPlayback>
