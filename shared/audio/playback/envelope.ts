// The fades a loop asks for at both ends of its passes.
import type { PlanPart } from './plan-types.ts'

/** However parts are cut short or moved, the level takes at least this many frames from nothing to full: no click. */
const fastestFrames = 192

/** Level wanted at an output frame: 1 but for the frames after a fading start and before a fading end. */
export const fadeAt = (parts: readonly PlanPart[], outFrame: number): number => {
  let level = 1
  for (const { outFrame: begin, fadeIn, fadeOut } of parts) {
    if (begin > outFrame) level = fadeOut > 0 ? Math.min(level, (begin - outFrame) / fadeOut) : level
    else level = fadeIn > 0 && outFrame - begin < fadeIn ? (outFrame - begin) / fadeIn : 1
  }
  return level
}

/** Lays the fades of a plan on sound, frame by frame, never faster than a click. */
export const createEnvelope = () => {
  let level = 1
  return (parts: readonly PlanPart[], samples: readonly Float32Array[], fromFrame: number, frames: number): void => {
    const hasFades = parts.some(({ fadeIn, fadeOut }) => fadeIn > 0 || fadeOut > 0)
    if (!hasFades && level === 1) return
    for (let at = 0; at < frames; at += 1) {
      const step = fadeAt(parts, fromFrame + at) - level
      level += Math.max(-1 / fastestFrames, Math.min(1 / fastestFrames, step))
      if (level === 1) continue
      for (const channel of samples) channel[at] = (channel[at] ?? 0) * level
    }
  }
}
