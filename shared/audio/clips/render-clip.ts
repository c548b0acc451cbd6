// The sound of a clip, block by block: the same stretcher, aids, click and limiter as at the desk.
import { createAidsChain } from '@shared/audio/aids/aids-chain'
import { createLimiter } from '@shared/audio/aids/limiter'
import { createClickVoice } from '@shared/audio/click-voice'
import type { ClipPlan } from '@shared/audio/clips/plan-clip'
import type { Aids } from '@shared/audio/listening'
import { memorySource } from '@shared/audio/stretch/offline'
import { createStretcher } from '@shared/audio/stretch/stretcher'
import type { SampleSource } from '@shared/audio/stretch/types'

const blockFrames = 4096
/** The passage begins and ends in the middle of sound: it rises and falls within this time, so that nothing knocks. */
const riseSec = 0.002
const fallSec = 0.01

export interface ClipSound {
  plan: ClipPlan
  aids: Aids
  /** Towards the moderate level (EBU R 128). */
  gainDb: number
  /** 0 to 1. */
  clickLevel: number
  /** The whole take or a part of it; `sourceStart` is the take's frame that is its frame 0. */
  source: SampleSource
  sourceStart: number
}

/** Frames of the take that rendering looks at before and after the passage. */
export const clipReach = (sampleRate: number): { before: number; after: number } =>
  createStretcher(memorySource([new Float32Array(0)], sampleRate)).reach

/**
 * Blocks of the clip in order, `plan.totalFrames` frames in all; each is an array of its own for every channel. Throws where
 * the source has not got its frames.
 */
export function* renderClip({
  plan,
  aids,
  gainDb,
  clickLevel,
  source,
  sourceStart
}: ClipSound): Generator<Float32Array[]> {
  const { sampleRate, channels } = source
  const { leadFrames, totalFrames, rate, ratio } = plan
  const stretcher = createStretcher(source)
  const sourceFrame = plan.startFrame - sourceStart
  if (leadFrames > 0) stretcher.schedule({ outFrame: 0, sourceFrame, speed: 1, ratio, isSilent: true })
  stretcher.schedule({ outFrame: leadFrames, sourceFrame, speed: rate, ratio })
  const chain = createAidsChain(sampleRate, channels)
  chain.set(aids, gainDb)
  const voice = createClickVoice(sampleRate)
  const limiter = createLimiter(sampleRate, { channels })
  const rise = Math.round(riseSec * sampleRate)
  const fall = Math.round(fallSec * sampleRate)
  const edge = (frame: number): number =>
    Math.max(0, Math.min(1, (frame - leadFrames + 0.5) / rise, (totalFrames - frame - 0.5) / fall))
  let struck = 0

  for (let frame = 0; frame < totalFrames + limiter.delayFrames; frame += blockFrames) {
    const count = Math.min(blockFrames, totalFrames + limiter.delayFrames - frame)
    const out = Array.from({ length: channels }, () => new Float32Array(count))
    const wanted = Math.max(0, Math.min(count, totalFrames - frame))
    if (stretcher.render(out, 0, wanted) < wanted) throw new Error('The take has not got the frames of this passage')
    chain.process(out, 0, count)
    for (let i = 0; i < count; i += 1) {
      const gain = edge(frame + i)
      if (gain < 1) for (const channel of out) channel[i] = (channel[i] ?? 0) * gain
    }
    for (; (plan.clicks[struck]?.frame ?? Infinity) < frame + count; struck += 1) {
      const click = plan.clicks[struck]
      if (click) voice.strike(click.frame, click.accent)
    }
    voice.mixInto(out, frame, count, clickLevel)
    limiter.process(out, 0, count)
    const late = Math.max(0, Math.min(count, limiter.delayFrames - frame))
    if (late < count) yield out.map((channel) => channel.subarray(late))
  }
}
