// What the plan of what sounds is made of. Places in the take and moments of the output are counted in frames of one rate.
import type { SpeedLadder } from '../../practice/ladder.ts'

/** A loop in whole frames of the take. */
export interface PlanLoop {
  startFrame: number
  endFrame: number
  /** Fade at both ends of a pass in output frames; 0 leaves it at the stretcher's own cut. */
  fadeFrames: number
  /** Silence between two passes in frames of the take: twice as long at half speed. */
  restFrames: number
  ladder: SpeedLadder | null
}

/** What decides how the take runs on from a place. */
export interface PlanSettings {
  /** What a person chose; a loop's ladder overrides it. */
  rate: number
  /** Bends the speed to keep listeners together; 1 is none. */
  trim: number
  /** Pitch ratio, 2 is an octave up. */
  ratio: number
  loop: PlanLoop | null
}

/**
 * stopped: stands. counting: clicks before the start. waiting: wants to sound and has no frames. playing: sounds.
 * resting: silence between two passes.
 */
export type PlanMode = 'stopped' | 'counting' | 'waiting' | 'playing' | 'resting'

/** From `outFrame` until the next part begins, the take goes like this. */
export interface PlanPart {
  /** Whole frame of the output. */
  outFrame: number
  mode: PlanMode
  /**
   * Frame of the take at `outFrame`, with its fraction. In a rest it runs towards the loop's start from as far before it as
   * the rest is long (that is where its clicks come from), though the take itself stands at that start.
   */
  sourceFrame: number
  /** Frames of the take in one of the output; 0 where nothing moves. */
  speed: number
  /** Where it ends by itself: the loop's end or start (rest), the take's end. Infinity where it does not. */
  endFrame: number
  /** When counting ends by itself (Infinity otherwise), and what is struck before. */
  untilFrame: number
  counts: readonly CountClick[]
  /** Does not go on from where the part before has come to. */
  isJump: boolean
  /** Output frames before `outFrame` in which what sounded before falls silent, and after it in which this one rises. */
  fadeOut: number
  fadeIn: number
  /** Passes done since the loop was set, and passes climbed on its ladder. */
  turns: number
  pass: number
  settings: PlanSettings
}

/** A click before the start: output frames before it (negative), and how strongly. */
export interface CountClick {
  atFrame: number
  accent: 0 | 1 | 2
}

/**
 * `lateFrames`: output frames by which a start or a jump was asked for too late; it is made up for, so that it is in its
 * place all the same.
 */
export type PlanCommand =
  | { kind: 'play'; countFrames?: number; counts?: readonly CountClick[]; lateFrames?: number }
  /** `sourceFrame`: the place that was heard when the person pressed; it stands there. */
  | { kind: 'pause'; sourceFrame?: number }
  | { kind: 'seek'; sourceFrame: number; lateFrames?: number }
  | { kind: 'rate'; rate: number }
  | { kind: 'trim'; trim: number }
  | { kind: 'ratio'; ratio: number }
  | { kind: 'loop'; loop: PlanLoop | null }
  /** The engine's own: out of frames, and frames again. */
  | { kind: 'starve' }
  | { kind: 'feed' }
