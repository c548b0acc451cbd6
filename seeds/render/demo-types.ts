// Shapes of what is rendered and of what is committed in seeds/demo.
import type { Reach } from '@shared/contracts/takes'
import type { ChartBody } from '@shared/music/types'
import type { BarMapBody, Position, Rational } from '@shared/timing/types'

export type Player = 'mara' | 'jory' | 'ines' | 'tomas' | 'pell' | 'wren'
export type Persona = Player | 'aude'

export interface DemoTune {
  slug: string
  title: string
  /** In plain words, for the tune's page. */
  about: string
  chart: ChartBody
}

/** How a take is played: everything the renderer needs, nothing measured. */
export interface TakePlan {
  slug: string
  title: string
  tune: DemoTune
  player: Player
  /** Who plays along, in the words of the take's page. */
  with: string
  reach: Reach
  named: Player[]
  /** Silence before the first bar of the bar map, in seconds. */
  leadSec: number
  /** 0 when the take opens with a count-in or a pick-up, else 1. */
  firstBar: 0 | 1
  bars: string[]
  form: BarMapBody['marks']
  tempo: TempoPlan
  /** Where the off-beat eighth falls within its beat: 0.5 even, 0.667 a triplet. */
  swing: number
  hand: Hand
  /** Louder or softer from this bar on, in MIDI velocity. */
  dynamics: Record<number, number>
  drums: { kit: number; style: 'ride' | 'brushes'; until: number; twoFeel: [number, number] | null } | null
  piano: { from: number; until: number; silent: [number, number] | null } | null
  /** Four clicks in bar 0. */
  countIn: boolean
  sound: Sound
}

export interface TempoPlan {
  bpm: number
  /** Share by which the take is faster at its end than at its start. */
  creep: number
  /** Bars that take longer (a hesitation, a free introduction, a slowing end): factor on their length. */
  stretch: Record<number, number>
}

export interface Hand {
  /** Usual place against the pulse in milliseconds: negative leans forward. */
  leanMs: number
  /** Scatter from note to note and slow wandering, both as standard deviations in milliseconds. */
  scatterMs: number
  wanderMs: number
  /** Share of a note's length that sounds. */
  legato: number
  velocity: number
  /** Bars played late, by this many milliseconds. */
  late: Record<number, number>
}

export interface Sound {
  /** General MIDI programs are counted from 0 here: 32 acoustic, 33 fingered, 34 picked, 35 fretless. */
  bass: number
  /** 0 left, 64 middle, 127 right. */
  pan: { bass: number; piano: number }
  volume: { bass: number; drums: number; piano: number }
  reverb: { room: number; damp: number; width: number; level: number }
  sampleRate: 44100 | 48000
  channels: 1 | 2
  /** Filters between the synthesizer and the loudness step; a room tone below -60 dB is added by `synth.ts`. */
  filters: string[]
  lufs: number
  extension: 'm4a' | 'ogg' | 'mp3' | 'webm'
  encoder: string[]
}

/** One note as played. `beat` and `lengthBeats` are as written: a swung off-beat stands on the half beat. */
export interface DemoNote {
  onsetSec: number
  offsetSec: number
  midi: number
  bar: number
  beat: Rational
  lengthBeats: Rational
  ghost?: true
}

/** seeds/demo/<slug>.json */
export interface DemoTake {
  slug: string
  title: string
  tune: string
  player: Player
  with: string
  reach: Reach
  named: Player[]
  file: string
  mime: string
  durationSec: number
  bytes: number
  sha256: string
  meter: string
  downbeats: { bar: number; sec: number }[]
  barMap: BarMapBody
  notes: DemoNote[]
}

/** seeds/demo/comments.json. `to` is where the span ends: bar 13 beat 1 closes a span over bars 11 and 12. */
export interface DemoComment {
  take: string
  author: Persona
  kind: 'question' | 'observation' | 'to fix' | 'good'
  from: Position
  to: Position
  text: string
  /** Only questions and things to fix are open or settled. */
  state: 'open' | 'settled' | null
  settledBy?: Persona
  settledAgoHours?: number
  agoHours: number
  replies: { author: Persona; text: string; agoHours: number }[]
}
