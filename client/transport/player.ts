// The one interface through which timeline, comments and the listening session see sound. Engines implement it.
import type { Sec } from '@shared/units'
import type { Span } from '@shared/timing/types'

export type PlayerState = 'empty' | 'loading' | 'ready' | 'playing' | 'failed'

export interface PlayerSource {
  /** Address of the rendition (or an object URL before anything is kept). */
  url: string
  durationSec: Sec
  /** Loudness gain to apply, in dB (EBU R128 towards the moderate level). */
  gainDb?: number
}

export interface PlayerLoop {
  span: Span
  fadeSec?: Sec
  restBeats?: number
}

export interface PlayerEvents {
  state: PlayerState
  /** A jump: seek, loop turn, new source. `positionSec` is where it plays from now. */
  jump: { positionSec: Sec }
  rate: { rate: number }
  loop: { loop: PlayerLoop | null }
  /** The loop came round; `count` passes are done since the loop was set. */
  turn: { count: number }
  /** The browser wants a tap before it lets sound out. */
  blocked: undefined
  fault: { message: string }
}

/** `at` is a time of `clock()`; an engine that cannot schedule acts at once. */
export interface Player {
  readonly state: PlayerState
  readonly durationSec: Sec
  /** What is heard now. */
  readonly heardPosition: Sec
  readonly rate: number
  readonly semitones: number
  readonly volume: number
  readonly loop: PlayerLoop | null
  /** The element wavesurfer follows. */
  readonly media: HTMLMediaElement
  /** Seconds on the engine's own clock. */
  clock(): Sec
  positionAt(clock: Sec): Sec
  load(source: PlayerSource): Promise<void>
  /** Resolves false when the browser refused to start sound without a tap. */
  play(at?: Sec): Promise<boolean>
  pause(at?: Sec): void
  seek(sec: Sec, at?: Sec): void
  setRate(rate: number, at?: Sec): void
  setPitch(semitones: number, at?: Sec): void
  setVolume(volume: number): void
  setLoop(loop: PlayerLoop | null, at?: Sec): void
  on<E extends keyof PlayerEvents>(event: E, listener: (payload: PlayerEvents[E]) => void): () => void
  dispose(): void
}
