// One step of a plan: what follows a part by itself, and what a command makes of it.
import { ladderRate } from '../../practice/ladder.ts'
import type { PlanCommand, PlanLoop, PlanPart, PlanSettings } from './plan-types.ts'

/** Sums of fractions are right to far less than this; a turn a hair past a whole frame belongs on that frame. */
const hairFrames = 1e-6

export const rateOf = ({ rate, loop }: PlanSettings, pass: number): number =>
  loop?.ladder ? ladderRate(loop.ladder, pass) : rate

const speedOf = ({ settings, pass }: Pick<PlanPart, 'settings' | 'pass'>): number =>
  rateOf(settings, pass) * settings.trim

/** When a part ends by itself, as a fraction of a frame after its start. */
const exactLength = (part: PlanPart): number => {
  if (part.untilFrame !== Infinity) return part.untilFrame - part.outFrame
  return part.speed > 0 && part.endFrame !== Infinity ? (part.endFrame - part.sourceFrame) / part.speed : Infinity
}

/** Whole output frames until a part ends by itself; Infinity for one that does not. */
export const partLength = (part: PlanPart): number => {
  const length = exactLength(part)
  return length === Infinity ? Infinity : Math.max(0, Math.ceil(length - hairFrames))
}

interface Begin {
  outFrame: number
  sourceFrame: number
  isJump: boolean
  fadeIn?: number
  fadeOut?: number
}

const playing = (from: PlanPart, begin: Begin, totalFrames: number): PlanPart => {
  const { settings, turns, pass } = from
  const speed = speedOf(from)
  // At full speed and pitch the samples are passed on as they are, so they lie on whole frames.
  const isPlain = speed === 1 && settings.ratio === 1
  const sourceFrame = isPlain ? Math.round(begin.sourceFrame) : begin.sourceFrame
  const { loop } = settings
  const endFrame = loop && sourceFrame < loop.endFrame ? loop.endFrame : totalFrames
  const still = { fadeIn: 0, fadeOut: 0, untilFrame: Infinity, counts: [] }
  return { ...still, ...begin, mode: 'playing', sourceFrame, speed, endFrame, turns, pass, settings }
}

const standing = (from: PlanPart, mode: 'stopped' | 'waiting' | 'counting', begin: Begin): PlanPart => ({
  fadeIn: 0,
  fadeOut: 0,
  untilFrame: Infinity,
  counts: [],
  ...begin,
  mode,
  speed: 0,
  endFrame: Infinity,
  turns: from.turns,
  pass: from.pass,
  settings: from.settings
})

/** `left`: frames of the take that the rest still lasts. */
const resting = (from: PlanPart, begin: Omit<Begin, 'sourceFrame'>, left: number, loop: PlanLoop): PlanPart => ({
  ...playing(from, { ...begin, sourceFrame: 0 }, 0),
  mode: 'resting',
  sourceFrame: loop.startFrame - left,
  endFrame: loop.startFrame
})

/** A fade longer than half of the pass would never let it be heard whole. */
const fadeOf = (loop: PlanLoop, speed: number): number =>
  Math.round(Math.min(loop.fadeFrames, (loop.endFrame - loop.startFrame) / speed / 2))

/** What comes after a part that ends by itself: the next pass, a rest before it, the start after counting, the take's end. */
export const follow = (part: PlanPart, totalFrames: number): PlanPart => {
  const outFrame = part.outFrame + partLength(part)
  if (part.mode === 'counting')
    return playing(part, { outFrame, sourceFrame: part.sourceFrame, isJump: true }, totalFrames)
  /** Output frames that the whole frame lies after the exact moment. */
  const late = outFrame - (part.outFrame + exactLength(part))
  const { loop } = part.settings
  const goOnAtStart = (from: PlanPart, fadeOut: number): PlanPart => {
    if (!loop) return from
    const speed = speedOf(from)
    const sourceFrame = loop.startFrame + late * speed
    return playing(from, { outFrame, sourceFrame, isJump: true, fadeOut, fadeIn: fadeOf(loop, speed) }, totalFrames)
  }
  if (part.mode === 'resting') return goOnAtStart(part, 0)
  if (!loop || part.endFrame !== loop.endFrame)
    return standing(part, 'stopped', { outFrame, sourceFrame: totalFrames, isJump: false })
  const next = { ...part, turns: part.turns + 1, pass: part.pass + 1 }
  const fadeOut = fadeOf(loop, part.speed)
  // The rest is so much shorter as it begins late.
  const rest = loop.restFrames - late * speedOf(next)
  return rest > 0 ? resting(next, { outFrame, isJump: true, fadeOut }, rest, loop) : goOnAtStart(next, fadeOut)
}

/** Where a place comes to in so many output frames, round the loop if it is in it. */
const after = (part: PlanPart, sourceFrame: number, outFrames: number): number => {
  const { loop } = part.settings
  const moved = sourceFrame + outFrames * speedOf(part)
  if (!loop || sourceFrame >= loop.endFrame || moved < loop.endFrame) return moved
  return loop.startFrame + ((moved - loop.endFrame) % (loop.endFrame - loop.startFrame))
}

const ladderText = (loop: PlanLoop | null): string => JSON.stringify(loop?.ladder ?? null)

/** What a command makes of a part from `outFrame` on; a command that changes nothing lets it go on as it is. */
export const obey = (part: PlanPart, command: PlanCommand, outFrame: number, totalFrames: number): PlanPart => {
  const moved = part.sourceFrame + (outFrame - part.outFrame) * part.speed
  const reached = Math.min(moved, Math.max(part.endFrame, part.sourceFrame))
  const here = part.mode === 'resting' ? part.endFrame : reached
  const jumpTo = (sourceFrame: number): Begin => ({ outFrame, sourceFrame, isJump: true })

  /** The same motion with other settings, from another place if one is given. */
  const goOn = (changed: PlanPart = part, sourceFrame?: number): PlanPart => {
    const begin = sourceFrame === undefined ? { outFrame, sourceFrame: here, isJump: false } : jumpTo(sourceFrame)
    if (part.mode === 'playing') return playing(changed, begin, totalFrames)
    if (part.mode === 'resting') {
      const { loop } = changed.settings
      if (sourceFrame !== undefined || !loop) return playing(changed, jumpTo(sourceFrame ?? here), totalFrames)
      return resting(changed, { outFrame, isJump: false }, Math.max(0, part.endFrame - reached), loop)
    }
    const { untilFrame, counts } = part
    return { ...standing(changed, part.mode, begin), untilFrame, counts }
  }
  const withSettings = (change: Partial<PlanSettings>): PlanPart => ({
    ...part,
    settings: { ...part.settings, ...change }
  })

  switch (command.kind) {
    case 'play': {
      if (part.mode !== 'stopped') return goOn()
      // At the very end there is nothing left to play.
      const from = here >= totalFrames ? (part.settings.loop?.startFrame ?? 0) : here
      const begin = jumpTo(Math.min(totalFrames, after(part, from, command.lateFrames ?? 0)))
      const countFrames = Math.round(command.countFrames ?? 0)
      if (countFrames <= 0) return playing(part, begin, totalFrames)
      const counts = command.counts ?? []
      return { ...standing(part, 'counting', begin), untilFrame: outFrame + countFrames, counts }
    }
    case 'pause':
      if (part.mode === 'stopped') return goOn()
      return standing(part, 'stopped', jumpTo(command.sourceFrame ?? here))
    case 'starve':
      return part.mode === 'playing' ? standing(part, 'waiting', jumpTo(here)) : goOn()
    case 'feed':
      return part.mode === 'waiting' ? playing(part, jumpTo(here), totalFrames) : goOn()
    case 'seek': {
      const late = part.mode === 'playing' || part.mode === 'resting' ? (command.lateFrames ?? 0) : 0
      return goOn(part, Math.max(0, Math.min(totalFrames, after(part, command.sourceFrame, late))))
    }
    case 'rate':
      return goOn(withSettings({ rate: command.rate }))
    case 'trim':
      return goOn(withSettings({ trim: command.trim }))
    case 'ratio':
      return goOn(withSettings({ ratio: command.ratio }))
    case 'loop': {
      const { loop } = command
      // A ladder is climbed on while only the ends of the loop are moved.
      const pass = ladderText(part.settings.loop) === ladderText(loop) ? part.pass : 0
      const changed = { ...withSettings({ loop }), turns: 0, pass }
      const isOutside = loop !== null && (here < loop.startFrame || here >= loop.endFrame)
      return isOutside ? goOn(changed, loop.startFrame) : goOn(changed)
    }
  }
}
