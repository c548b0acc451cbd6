// The one interface through which timeline, comments and the listening session see sound. Engines implement it.
import type { Sec } from '@shared/units'
import type { Aids } from '@shared/audio/listening'
import type { SpeedLadder } from '@shared/practice/ladder'
import type { Span } from '@shared/timing/types'

export type PlayerState = 'empty' | 'loading' | 'ready' | 'playing' | 'failed'

export interface PlayerSource {
  /** Address of the rendition (or an object URL before anything is kept). */
  url: string
  durationSec: Sec
  /** Address of the manifest of its pieces; an engine that can do without plays `url`. */
  piecesUrl?: string
  /** The recording itself where it lies in this browser; a short one is decoded whole. */
  file?: Blob
  /** Loudness gain to apply, in dB (EBU R128 towards the moderate level). */
  gainDb?: number
}

export interface PlayerLoop {
  span: Span
  /** Fades the ends of every pass in and out; 0 or none is a cut as short as can be without a click. */
  fadeSec?: Sec
  /** Silence between two passes, as seconds of take: at half speed it lasts twice as long. */
  restSec?: Sec
  /** Gets faster pass by pass. While it is there the loop decides the rate. */
  ladder?: SpeedLadder
}

/** A click to come: a place in the take and how strongly it is struck. */
export interface GridClick {
  sec: Sec
  /** 2 the bar's first, 1 a beat, 0 a subdivision. */
  accent: 0 | 1 | 2
}

/** Clicks before the start: how long before it, in seconds of real time, rising towards it (negative). */
export interface CountIn {
  leadSec: Sec
  clicks: { atSec: Sec; accent: 0 | 1 | 2 }[]
}

export interface PlayerEvents {
  state: PlayerState
  /** A jump: seek, loop turn, new source. `positionSec` is where it plays from now. */
  jump: { positionSec: Sec }
  rate: { rate: number }
  pitch: { semitones: number }
  aids: { aids: Aids }
  clicks: { isOn: boolean }
  loop: { loop: PlayerLoop | null }
  /** The loop came round; `count` passes are done since the loop was set. */
  turn: { count: number }
  /** The browser wants a tap before it lets sound out. */
  blocked: undefined
  fault: { message: string }
}

/** Speeds every engine keeps to. */
export const rateLimits = { min: 0.2, max: 1.5 }
/** Moderate on purpose: a first sound must not be a loud one. */
export const defaultVolume = 0.7

/** What an engine can do beyond playing, seeking, looping and slowing. */
export interface PlayerCapabilities {
  /** Can shift pitch; without it `setPitch` is ignored and `semitones` stays 0. */
  pitch: boolean
  /** Can act at a moment to come (`at`). */
  schedule: boolean
  /** Low focus, channels, fine tune and the octave switch. */
  aids: boolean
  /** Clicks, counting in, rests between passes. */
  clicks: boolean
}

/** `at` is a time of `clock()`; an engine that cannot schedule acts at once. */
export interface Player {
  readonly capabilities: PlayerCapabilities
  readonly state: PlayerState
  readonly durationSec: Sec
  /** What is heard now. */
  readonly heardPosition: Sec
  readonly rate: number
  readonly semitones: number
  readonly volume: number
  readonly loop: PlayerLoop | null
  readonly aids: Aids
  /** Seconds on the engine's own clock, of what is heard now: asked for `at` clock() + 1, a thing is heard in a second. */
  clock(): Sec
  positionAt(clock: Sec): Sec
  /** Resolves when the source can be sought in, or has failed (`state` and `fault` tell). Stops what was playing. */
  load(source: PlayerSource): Promise<void>
  /** Resolves false when the browser refused to start sound without a tap. */
  play(at?: Sec): Promise<boolean>
  pause(at?: Sec): void
  seek(sec: Sec, at?: Sec): void
  setRate(rate: number, at?: Sec): void
  /** A few percent faster or slower without being another speed: how listeners are kept together. 1 is none. */
  setTrim(factor: number): void
  setPitch(semitones: number, at?: Sec): void
  setAids(aids: Aids): void
  setVolume(volume: number): void
  /** Clicks laid along the take, rising; null is none. `level` 0-1. */
  setClicks(clicks: readonly GridClick[] | null, level?: number): void
  /** Asked at every start that a person makes, with the place and the rate; null starts at once. */
  setCountIn(countIn: ((startSec: Sec, rate: number) => CountIn | null) | null): void
  setLoop(loop: PlayerLoop | null, at?: Sec): void
  on<E extends keyof PlayerEvents>(event: E, listener: (payload: PlayerEvents[E]) => void): () => void
  dispose(): void
}
