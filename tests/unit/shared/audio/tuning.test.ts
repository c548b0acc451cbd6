import { execFileSync } from 'node:child_process'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createTuningFinder, type Tuning } from '@shared/audio/tuning'

const rate = 11_025
const find = (mono: Float32Array, at = rate, step = 8192): Tuning | null => {
  const finder = createTuningFinder(at)
  for (let from = 0; from < mono.length; from += step) finder.push(mono.subarray(from, from + step))
  return finder.result()
}

/** The pitches of ISO 16 in equal temperament: note 69 is A at 440 Hz. */
const hzOf = (midi: number, cents = 0): number => 440 * 2 ** ((midi - 69) / 12 + cents / 1200)

interface Note {
  midi: number
  from: number
  sec: number
}

/** Plucked strings with eight partials each, stretched as a stiff string's are (Fletcher 1964: n f0 sqrt(1 + B n^2)). */
const play = (notes: Note[], cents: number, stiffness = 0, partials = [1, 2, 3, 4, 5, 6, 7, 8]): Float32Array => {
  const end = Math.max(...notes.map(({ from, sec }) => from + sec))
  const mono = new Float32Array(Math.ceil(end * rate))
  for (const { midi, from, sec } of notes) {
    for (const n of partials) {
      const turn = (2 * Math.PI * n * hzOf(midi, cents) * Math.sqrt(1 + stiffness * n * n)) / rate
      for (let i = 0, at = Math.floor(from * rate); i < sec * rate && at < mono.length; i++, at++)
        mono[at]! += (0.2 / n) * Math.exp((-n * i) / (rate * 1.5)) * Math.min(1, i / 200) * Math.sin(turn * i)
    }
  }
  return mono
}
const line = (midis: number[], sec = 0.5): Note[] => midis.map((midi, i) => ({ midi, from: i * sec, sec: sec * 0.95 }))
const walk = [33, 36, 40, 43, 41, 45, 38, 34, 35, 39, 42, 46, 44, 37, 40, 33]
const chords = [
  [48, 52, 55, 58],
  [53, 57, 60, 63],
  [50, 53, 57, 60],
  [55, 59, 62, 65]
].flatMap((chord, i) => chord.map((midi) => ({ midi, from: i * 1.5, sec: 1.4 })))

/** Steps of 2^31 - 1, after Park & Miller 1988; -1 to 1. */
const noiseOf = (seed: number) => {
  let state = seed
  return () => (state = (state * 48_271) % 2_147_483_647) / 1_073_741_823.5 - 1
}
const hiss = (sec: number, seed: number): Float32Array => {
  const next = noiseOf(seed)
  return Float32Array.from({ length: sec * rate }, () => next() * 0.3)
}

/** Kick that falls, snare with two modes of its drumhead, ride with modes of its own: none of them tuned to another. */
const drums = (bars: number, seed = 7): Float32Array => {
  const mono = new Float32Array(bars * 2 * rate)
  const next = noiseOf(seed)
  const strike = (fromSec: number, decaySec: number, sound: (sec: number) => number) => {
    for (let i = 0, at = Math.floor(fromSec * rate); i < rate * decaySec * 5 && at < mono.length; i++, at++)
      mono[at]! += Math.exp(-i / rate / decaySec) * sound(i / rate)
  }
  const sine = (hz: number, sec: number) => Math.sin(2 * Math.PI * hz * sec)
  for (let beat = 0; beat < bars * 4; beat++) {
    const at = beat * 0.5
    if (beat % 2 === 0) strike(at, 0.15, (sec) => 0.6 * sine(52 * sec + 3 * (1 - Math.exp(-sec * 30)), 1))
    else strike(at, 0.08, (sec) => 0.2 * sine(187, sec) + 0.15 * sine(331, sec) + 0.3 * next())
    strike(at, 0.4, (sec) => [413, 577, 689, 842, 967].reduce((sum, hz) => sum + 0.02 * sine(hz, sec), 0.1 * next()))
  }
  return mono
}

describe('the tuning of a recording', () => {
  it('is found within a cent on lines and chords detuned by known cents, of soft and of stiff strings', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -45, max: 45 }),
        fc.constantFrom<[Note[], number]>([line(walk), 0], [line(walk), 1e-4], [chords, 5e-5]),
        (cents, [notes, stiffness]) => {
          const found = find(play(notes, cents, stiffness))
          expect(Math.abs((found?.cents ?? Infinity) - cents)).toBeLessThanOrEqual(1)
          expect(found?.confidence).toBeGreaterThan(0.9)
        }
      ),
      { numRuns: 5 }
    )
  }, 30_000)

  // ISO 16: A at 440 Hz, so that an A at 432 Hz lies 31.8 cents below. The A, and what stands on it in equal temperament.
  it.each([8000, 44_100, 48_000, 96_000])('is that of the A in ISO 16, at %i samples a second', (at) => {
    const tones = (a: number) => {
      const turns = [0, -2, -5, -8, -12].map((semitones) => (2 * Math.PI * a * 2 ** (semitones / 12)) / at)
      return Float32Array.from({ length: at * 2 }, (_, i) =>
        turns.reduce((sum, turn) => sum + 0.1 * Math.sin(turn * i), 0)
      )
    }
    expect(find(tones(440), at)?.cents).toBeCloseTo(0, 1)
    expect(find(tones(432), at)?.cents).toBeCloseTo(-31.77, 1)
  })

  it('is not drawn off by high partials, the fundamental being there or gone', () => {
    const low = line([33, 35, 38, 33, 36, 31])
    expect(Math.abs(find(play(low, 12, 0, [2, 3, 4, 5, 6, 7, 8, 9, 10]))?.cents ?? Infinity) - 12).toBeLessThanOrEqual(
      1
    )
  })

  it('is the same whatever the size of the chunks, to the last bit', () => {
    const mono = play(line(walk.slice(0, 8)), -18)
    expect(find(mono, rate, 97)).toEqual(find(mono, rate, mono.length))
  })

  it('is unknown for silence, noise, a drum kit alone and notes that share no tuning', () => {
    expect(find(new Float32Array(rate * 5))).toBeNull()
    expect(find(new Float32Array(100))).toBeNull()
    for (const seed of [1, 2]) expect(find(hiss(6, seed * 1000))).toBeNull()
    expect(find(drums(5))).toBeNull()
    const astray = walk.map((midi, i) => ({ midi: midi + (i % 4) / 4, from: i * 0.5, sec: 0.45 }))
    expect(find(play(astray, 0))).toBeNull()
  })

  it('is still found under a drum kit', () => {
    const kit = drums(4)
    const mono = play(line(walk), 22)
    kit.forEach((sample, i) => (kit[i] = sample * 0.5 + (mono[i] ?? 0)))
    expect(Math.abs((find(kit)?.cents ?? Infinity) - 22)).toBeLessThanOrEqual(1)
  })
})

const clips = join(import.meta.dirname, '../../../../../shared/audio-bench/clips')
const hasClips = existsSync(clips)

describe.skipIf(!hasClips)('on clips with known tuning (skipped where that folder is not)', () => {
  it('is within five cents on most of them', () => {
    const names = readdirSync(clips).filter((name) => name.endsWith('.json'))
    const near = names.filter((name) => {
      const truth = JSON.parse(readFileSync(join(clips, name), 'utf8')) as { audio: string; tuningCents: number }
      const decode = [
        '-v',
        'error',
        '-t',
        '10',
        '-i',
        join(clips, truth.audio),
        '-ac',
        '1',
        '-ar',
        String(rate),
        '-f',
        'f32le',
        '-'
      ]
      const bytes = execFileSync('ffmpeg', decode, { maxBuffer: 1 << 26 })
      const found = find(new Float32Array(Uint8Array.from(bytes).buffer))
      return Math.abs((found?.cents ?? Infinity) - truth.tuningCents) <= 5
    })
    expect(near.length).toBeGreaterThanOrEqual(Math.ceil(names.length * 0.75))
  }, 60_000)
})
