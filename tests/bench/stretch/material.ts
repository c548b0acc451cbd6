// What the cases are made of: sounds with the truth about them.
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import {
  addKick,
  addNoise,
  addPluck,
  addVoice,
  createRandom,
  finish,
  frequencyOf,
  pan,
  plainPluck,
  steadyTone
} from './signals.ts'
import { readSound, type Sound } from './wav.ts'

export interface Attack {
  sec: number
  /** Of the note that begins; for the width of a period. */
  hertz: number
}

/** One steady stretch of a known pitch, apart from every other partial around it. */
export interface KnownPitch {
  hertz: number
  fromSec: number
  toSec: number
}

export interface Material {
  sound: Sound
  tone?: { hertz: number; partials: number }
  attacks?: Attack[]
  pitches?: KnownPitch[]
}

export const toneMaterial = (hertz: number): Material => {
  const partials = hertz < 120 ? 10 : 7
  const shape = { hertz, seconds: 4, partials, slope: -1 }
  return { sound: steadyTone(shape, hertz > 100 ? 48_000 : 44_100, Math.round(hertz)), tone: { hertz, partials } }
}

const melodySteps = [0, 3, 5, 7, 10, 7, 5, 12, 10, 3, 0, 5]

export interface PluckPlan {
  hertz: number
  isMelody?: boolean
  isRinging?: boolean
}

/** 24 notes; ringing ones are stopped by the next as on one string, the others before it. */
export const pluckMaterial = ({ hertz, isMelody, isRinging }: PluckPlan): Material => {
  const sampleRate = hertz > 60 ? 44_100 : 48_000
  const random = createRandom(1000 + Math.round(hertz) + (isMelody ? 7 : 0))
  const attacks: Attack[] = []
  let sec = 0.3
  for (let i = 0; i < 24; i += 1) {
    const step = isMelody ? (melodySteps[i % melodySteps.length] ?? 0) : 0
    attacks.push({ sec: Math.round(sec * sampleRate) / sampleRate, hertz: hertz * 2 ** (step / 12) })
    sec += 0.32 + 0.24 * random()
  }
  const out = new Float32Array(Math.round((sec + 0.4) * sampleRate))
  attacks.forEach((attack, i) => {
    const next = attacks[i + 1]?.sec ?? sec
    const holdSec = isRinging ? next - attack.sec : (next - attack.sec) * 0.78
    const level = 0.7 + 0.3 * random()
    addPluck(out, { ...plainPluck, ...attack, startSec: attack.sec, holdSec, level }, sampleRate, random)
  })
  return { sound: finish([out], sampleRate), attacks }
}

/** Bursts of 2 ms of noise, or blips of 1500 Hz that die away. */
export const clickMaterial = (kind: 'bursts' | 'blips'): Material => {
  const sampleRate = 44_100
  const random = createRandom(kind === 'blips' ? 31 : 32)
  const attacks: Attack[] = []
  for (let sec = 0.3; sec < 6; sec += 0.1 + 0.4 * random())
    attacks.push({ sec: Math.round(sec * sampleRate) / sampleRate, hertz: 1000 })
  const out = new Float32Array(Math.round(6.5 * sampleRate))
  for (const { sec } of attacks)
    if (kind === 'bursts') addNoise(out, { startSec: sec, seconds: 0.003, fall: 300, level: 1 }, sampleRate, random)
    else
      addVoice(
        out,
        { hertz: 1500, startSec: sec, holdSec: 0.03, level: 1, decay: 90, attackSec: 0.0007 },
        sampleRate,
        random
      )
  return { sound: finish([out], sampleRate), attacks }
}

const changes = [
  [38, [57, 60, 65, 69]],
  [31, [55, 59, 65]],
  [36, [52, 59, 62, 67]],
  [33, [55, 61, 64]]
] as const

/** A bass left of the middle, the voices of the chords spread to the right; `isHeld`: the chords hardly die away. */
export const mixMaterial = (isHeld: boolean): Material => {
  const sampleRate = 44_100
  const random = createRandom(isHeld ? 51 : 52)
  const frames = Math.round(8.6 * sampleRate)
  const sides = [new Float32Array(frames), new Float32Array(frames)]
  const pitches: KnownPitch[] = []
  const attacks: Attack[] = []
  changes.forEach(([bass, chord], bar) => {
    const begin = 0.2 + bar * 2
    for (const startSec of [begin, begin + 1]) {
      const hertz = frequencyOf(bass)
      const mono = new Float32Array(frames)
      addPluck(mono, { ...plainPluck, decay: 0.8, hertz, startSec, holdSec: 0.92, level: 0.8 }, sampleRate, random)
      pan(mono, 0.3, sides)
      pitches.push({ hertz: hertz * Math.sqrt(1 + 8e-5), fromSec: startSec + 0.15, toSec: startSec + 0.85 })
      attacks.push({ sec: startSec, hertz })
    }
    chord.forEach((midi, i) => {
      const hertz = frequencyOf(midi)
      const mono = new Float32Array(frames)
      const decay = isHeld ? 0.3 : 1.5
      addVoice(mono, { hertz, startSec: begin, holdSec: 1.9, level: 0.3, decay, attackSec: 0.02 }, sampleRate, random)
      pan(mono, 0.35 + 0.2 * i, sides)
      pitches.push({ hertz, fromSec: begin + 0.2, toSec: begin + 0.95 })
    })
  })
  return { sound: finish(sides, sampleRate), pitches, attacks }
}

/** A walking line, soft drums and chords off the beat, in stereo. */
export const bandMaterial = (beatSec: number): Material => {
  const sampleRate = 44_100
  const random = createRandom(Math.round(beatSec * 1000))
  const beats = Math.floor(9.5 / beatSec)
  const frames = Math.round((beats * beatSec + 0.8) * sampleRate)
  const sides = [new Float32Array(frames), new Float32Array(frames)]
  const [bass, drums, keys] = [new Float32Array(frames), new Float32Array(frames), new Float32Array(frames)] as const
  const attacks: Attack[] = []
  const walk = [0, 4, 7, 9, 10, 9, 7, 3]
  for (let beat = 0; beat < beats; beat += 1) {
    const sec = 0.25 + beat * beatSec + 0.012 * (random() - 0.5)
    const hertz = frequencyOf(33 + 5 * (Math.floor(beat / 8) % 2) + (walk[beat % 8] ?? 0))
    addPluck(
      bass,
      { ...plainPluck, hertz, startSec: sec, holdSec: beatSec * 0.85, level: 0.7, noise: 0.15 },
      sampleRate,
      random
    )
    attacks.push({ sec, hertz })
    const grid = 0.25 + beat * beatSec
    addNoise(drums, { startSec: grid, seconds: 0.18, fall: 28, level: 0.1 }, sampleRate, random)
    if (beat % 2 === 1)
      addNoise(drums, { startSec: grid + beatSec * 0.66, seconds: 0.08, fall: 60, level: 0.08 }, sampleRate, random)
    if (beat % 4 === 0) addKick(drums, grid, 0.5, sampleRate)
    if (beat % 3 === 1)
      for (const step of [16, 19, 22, 26])
        addVoice(
          keys,
          {
            hertz: frequencyOf(36 + step),
            startSec: grid + beatSec / 2,
            holdSec: beatSec * 0.7,
            level: 0.14,
            decay: 2.5,
            attackSec: 0.004
          },
          sampleRate,
          random
        )
  }
  pan(bass, 0.45, sides)
  pan(drums, 0.6, sides)
  pan(keys, 0.3, sides)
  return { sound: finish(sides, sampleRate), attacks }
}

const clipFolder = join(import.meta.dirname, '../../../../shared/audio-bench/clips')

/** Rendered clips kept beside the project, when they are there; not those through a telephone, in which noise hides the onsets. */
export const clipNames = (): string[] =>
  existsSync(clipFolder)
    ? readdirSync(clipFolder)
        .filter((name) => name.endsWith('.json'))
        .map((name) => name.replace('.json', ''))
        .filter((name) => !readFileSync(join(clipFolder, `${name}.json`), 'utf8').includes('"condition": "phone"'))
        .sort()
    : []

/** The first 10 seconds, with the beginnings of the bass's notes. */
export const clipMaterial = (name: string): Material => {
  const truth = JSON.parse(readFileSync(join(clipFolder, `${name}.json`), 'utf8')) as {
    audio: string
    notes: { onset: number; midi: number }[]
  }
  const seconds = 10
  const whole = readSound(join(clipFolder, truth.audio), 44_100, 2)
  const channels = whole.channels.map((channel) => channel.map((value) => value * 0.8).subarray(0, seconds * 44_100))
  const attacks = truth.notes
    .filter((note) => note.onset < seconds - 0.5)
    .map((note) => ({ sec: note.onset, hertz: frequencyOf(note.midi) }))
  return { sound: { channels, sampleRate: 44_100 }, attacks }
}
