import type { PlanPart, PlanSettings } from './plan-types.ts'

/** What every plan begins with: standing at a place. */
export const startPart = (settings: PlanSettings, sourceFrame: number): PlanPart => ({
  outFrame: 0,
  mode: 'stopped',
  sourceFrame,
  speed: 0,
  endFrame: Infinity,
  untilFrame: Infinity,
  counts: [],
  isJump: true,
  fadeIn: 0,
  fadeOut: 0,
  turns: 0,
  pass: 0,
  settings
})
