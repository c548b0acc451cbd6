// What the page and the worklet say to each other. Everything here can be cloned; pages are handed over, not copied.
import type { Aids } from '../listening.ts'
import type { Page } from './page-store.ts'
import type { PlanCommand, PlanPart, PlanSettings } from './plan-types.ts'
import type { FrameClick } from './strikes.ts'

export type ToWorklet =
  /** A take (anew): everything before is forgotten. `load` numbers it; what is said of an earlier one is ignored. */
  | {
      kind: 'take'
      load: number
      channels: number
      sampleRate: number
      frames: number
      settings: PlanSettings
      sourceFrame: number
      aids: Aids
      gainDb: number
      volume: number
      clicks: FrameClick[] | null
      clickLevel: number
    }
  | { kind: 'page'; load: number; index: number; page: Page }
  | { kind: 'drop'; load: number; index: number }
  /** `atFrame` is a frame of the plan; without it as soon as it can be. Answered by `done` with the frame it took. */
  | { kind: 'command'; load: number; id: number; command: PlanCommand; atFrame?: number }
  | { kind: 'aids'; aids: Aids; gainDb: number }
  | { kind: 'volume'; gain: number }
  | { kind: 'clicks'; clicks: FrameClick[] | null; level: number }

export type FromWorklet =
  /** The plan's frame 0 sounds `delaySec` after `startSec` of the context. */
  | { kind: 'start'; load: number; startSec: number; delaySec: number }
  | { kind: 'done'; load: number; id: number; frame: number }
  | { kind: 'plan'; load: number; fromFrame: number; parts: PlanPart[] }
  | { kind: 'begun'; load: number; parts: PlanPart[] }
  /** Now and then, so that the page does not lean on its own timers, which sleep in the background. */
  | { kind: 'beat'; load: number; frame: number }
