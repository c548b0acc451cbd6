// Seeded test sounds of our own whose pitch, places and levels are known exactly.
import type { Sound } from './wav.ts'

/** Seeded, 0 to 1; the multiply-and-shift hash of the counter is as random as test noise needs to be. */
export const createRandom = (seed: number): (() => number) => {
  let count = seed >>> 0
  return () => {
    count = (count + 0x9e3779b9) >>> 0
    let mixed = Math.imul(count ^ (count >>> 16), 0x21f0aaad)
    mixed = Math.imul(mixed ^ (mixed >>> 15), 0x735a2d97)
    return ((mixed ^ (mixed >>> 15)) >>> 0) / 2 ** 32
  }
}

export const frequencyOf = (midi: number): number => 440 * 2 ** ((midi - 69) / 12)

const scaleToPeak = (channels: Float32Array[], peak: number): void => {
  let loudest = 0
  for (const channel of channels) for (const value of channel) loudest = Math.max(loudest, Math.abs(value))
  for (const channel of channels) for (let i = 0; i < channel.length; i += 1) (channel[i] as number) *= peak / loudest
}

export const finish = (channels: Float32Array[], sampleRate: number, peak = 0.6): Sound => {
  scaleToPeak(channels, peak)
  return { channels, sampleRate }
}

export interface ToneShape {
  hertz: number
  seconds: number
  partials: number
  /** Partial k has the amplitude k to this power. */
  slope: number
}

/** Steady harmonics with random phases, 30 ms in and out. */
export const steadyTone = (shape: ToneShape, sampleRate: number, seed: number): Sound => {
  const random = createRandom(seed)
  const frames = Math.round(shape.seconds * sampleRate)
  const out = new Float32Array(frames)
  for (let k = 1; k <= shape.partials; k += 1) {
    const step = (2 * Math.PI * k * shape.hertz) / sampleRate
    const phase = 2 * Math.PI * random()
    const level = k ** shape.slope
    for (let i = 0; i < frames; i += 1) (out[i] as number) += level * Math.sin(phase + step * i)
  }
  const edge = 0.03 * sampleRate
  for (let i = 0; i < frames; i += 1) {
    const near = Math.min(1, (Math.min(i, frames - 1 - i) + 0.5) / edge)
    ;(out[i] as number) *= 0.5 - 0.5 * Math.cos(Math.PI * near)
  }
  return finish([out], sampleRate)
}

export interface Pluck {
  hertz: number
  startSec: number
  /** Until it is stopped (25 ms). */
  holdSec: number
  level: number
  attackSec: number
  /** Level of the noise of the finger beside the note's. */
  noise: number
  /** How fast the fundamental dies away, a second. */
  decay: number
  /** Fall of the partials: a softer note has a steeper one. */
  slope: number
}

export const plainPluck = { level: 1, attackSec: 0.009, noise: 0.35, decay: 1.6, slope: -1.2 }

/** A string: slightly stiff partials that die the faster the higher they are, and a short noise where it is plucked. */
export const addPluck = (out: Float32Array, pluck: Pluck, sampleRate: number, random: () => number): void => {
  const from = Math.round(pluck.startSec * sampleRate)
  const frames = Math.min(out.length - from, Math.round((pluck.holdSec + 0.025) * sampleRate))
  const shape = new Float64Array(Math.max(0, frames))
  const partials = Math.min(24, Math.floor(3500 / pluck.hertz))
  for (let k = 1; k <= partials; k += 1) {
    const step = (2 * Math.PI * k * pluck.hertz * Math.sqrt(1 + 8e-5 * k * k)) / sampleRate
    if (step > 2.8) break
    const phase = 2 * Math.PI * random()
    const level = Math.abs(Math.sin(Math.PI * k * 0.19)) * k ** pluck.slope
    const fall = Math.exp(-(pluck.decay + 0.35 * k) / sampleRate)
    let now = level
    for (let i = 0; i < frames; i += 1) {
      ;(shape[i] as number) += now * Math.sin(phase + step * i)
      now *= fall
    }
  }
  const attack = pluck.attackSec * sampleRate
  const hold = pluck.holdSec * sampleRate
  for (let i = 0; i < frames; i += 1) {
    const up = i < attack ? 0.5 - 0.5 * Math.cos((Math.PI * i) / attack) : 1
    const down = i > hold ? Math.max(0, 1 - (i - hold) / (0.025 * sampleRate)) : 1
    ;(out[from + i] as number) += pluck.level * up * down * (shape[i] as number)
  }
  addNoise(
    out,
    { startSec: pluck.startSec, seconds: 0.02, fall: 250, level: pluck.level * pluck.noise },
    sampleRate,
    random
  )
}

export interface NoiseBurst {
  startSec: number
  seconds: number
  /** A second. */
  fall: number
  level: number
}

/** Noise with the lows taken out, rising within 1 ms. */
export const addNoise = (out: Float32Array, burst: NoiseBurst, sampleRate: number, random: () => number): void => {
  const from = Math.round(burst.startSec * sampleRate)
  const frames = Math.min(out.length - from, Math.round(burst.seconds * sampleRate))
  let before = 0
  for (let i = 0; i < frames; i += 1) {
    const now = 2 * random() - 1
    const t = i / sampleRate
    const end = Math.min(1, (frames - i) / (0.002 * sampleRate))
    ;(out[from + i] as number) +=
      burst.level * Math.min(1, t / 0.001) * Math.exp(-burst.fall * t) * end * (now - before)
    before = now
  }
}

/** A drum's skin: a tone that falls to its pitch. */
export const addKick = (out: Float32Array, startSec: number, level: number, sampleRate: number): void => {
  const from = Math.round(startSec * sampleRate)
  const frames = Math.min(out.length - from, Math.round(0.25 * sampleRate))
  let phase = 0
  for (let i = 0; i < frames; i += 1) {
    const t = i / sampleRate
    phase += (2 * Math.PI * (52 + 90 * Math.exp(-t * 50))) / sampleRate
    ;(out[from + i] as number) += level * Math.min(1, t / 0.002) * Math.exp(-t * 16) * Math.sin(phase)
  }
}

export interface Voice {
  hertz: number
  startSec: number
  holdSec: number
  level: number
  decay: number
  attackSec: number
}

/** A held note of a chord: five partials, let go within 60 ms. Starts with the phase it is given. */
export const addVoice = (out: Float32Array, voice: Voice, sampleRate: number, random: () => number): void => {
  const from = Math.round(voice.startSec * sampleRate)
  const frames = Math.min(out.length - from, Math.round((voice.holdSec + 0.06) * sampleRate))
  for (let k = 1; k <= 5; k += 1) {
    const phase = 2 * Math.PI * random()
    const step = (2 * Math.PI * k * voice.hertz) / sampleRate
    for (let i = 0; i < frames; i += 1) {
      const t = i / sampleRate
      const up = Math.min(1, t / voice.attackSec)
      const down = t > voice.holdSec ? Math.max(0, 1 - (t - voice.holdSec) / 0.06) : 1
      ;(out[from + i] as number) +=
        voice.level * k ** -1.4 * up * down * Math.exp(-voice.decay * t) * Math.sin(phase + step * i)
    }
  }
}

/** Equal power: 0 is left, 1 right. */
export const pan = (mono: Float32Array, place: number, into: readonly Float32Array[]): void => {
  const levels = [Math.cos((place * Math.PI) / 2), Math.sin((place * Math.PI) / 2)]
  into.forEach((channel, c) => {
    for (let i = 0; i < channel.length; i += 1) (channel[i] as number) += (levels[c] ?? 0) * (mono[i] ?? 0)
  })
}
