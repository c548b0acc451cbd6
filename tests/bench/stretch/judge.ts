// All figures of one case.
import { type AttackOptions, compareAttacks, measureNotes } from './attack-measures.ts'
import { type Case, ratioOf } from './cases.ts'
import { middleChannel } from './dsp.ts'
import type { Figures } from './limits.ts'
import type { Material } from './material.ts'
import { measureTone, type Span } from './tone-measures.ts'
import { findOnsets, matchOnsets, measureMix, measureWhole, spectralDistance } from './whole-measures.ts'
import type { Sound } from './wav.ts'
import { median } from '@shared/timing/statistics'
import { percentile } from '../statistics.ts'

/** The middle of a tone, at most 6 s of it. */
const steadySpan = (frames: number, rate: number): Span => {
  const half = Math.min(3 * rate, 0.36 * frames)
  return { from: Math.round(frames / 2 - half), to: Math.round(frames / 2 + half) }
}

const toneFigures = (
  tone: { hertz: number; partials: number },
  source: Sound,
  output: Sound,
  ratio: number
): Figures => {
  const measured = [
    { sound: source, hertz: tone.hertz },
    { sound: output, hertz: tone.hertz * ratio }
  ].map(({ sound, hertz }) => {
    const x = middleChannel(sound.channels)
    return measureTone(x, sound.sampleRate, hertz, tone.partials, steadySpan(x.length, sound.sampleRate))
  })
  const [before, after] = measured
  if (!before || !after) throw new Error('two sounds are measured')
  const levels = after.partials.map((level, i) => Math.abs(level - (before.partials[i] ?? level)))
  return {
    cents: after.cents,
    ripple: after.ripple,
    partialDb: Math.max(...levels),
    offPartials: after.offPartials
  }
}

const attackFigures = (one: Case, { attacks = [], sound }: Material, output: Sound): Figures => {
  const isClick = one.group === 'clicks'
  const ratio = ratioOf(one)
  const options = (by: number): AttackOptions => ({
    fineSec: isClick ? 0.0005 : 0.002,
    noiseHz: (isClick ? 500 : 4500) * by
  })
  const warped = attacks.map(({ sec, hertz }) => ({ sec: sec / one.speed, hertz: hertz * ratio }))
  const before = measureNotes(middleChannel(sound.channels), sound.sampleRate, attacks, 1, one.speed, options(1))
  const after = measureNotes(
    middleChannel(output.channels),
    output.sampleRate,
    warped,
    1 / one.speed,
    1,
    options(ratio)
  )
  return { ...compareAttacks(before, after) }
}

const clipFigures = (one: Case, source: Sound, output: Sound): Figures => {
  const expected = findOnsets(source, 1).map((sec) => sec / one.speed)
  const { f1, late } = matchOnsets(expected, findOnsets(output, 1 / one.speed), 0.05 * Math.max(1, 0.5 / one.speed))
  const offset = median(late) ?? NaN
  return {
    f1,
    offset: offset * 1000,
    place95:
      1000 *
      percentile(
        late.map((value) => Math.abs(value - offset)),
        0.95
      )
  }
}

export const judge = (one: Case, material: Material, output: Sound): Figures => {
  const { sound, tone, attacks, pitches } = material
  const ratio = ratioOf(one)
  const isShifted = one.semitones !== 0 || one.cents !== 0
  const figures: Figures = {}
  if (tone) Object.assign(figures, toneFigures(tone, sound, output, ratio))
  if (pitches) Object.assign(figures, measureMix(sound, output, pitches, one.speed, ratio))
  if (attacks && (one.group === 'plucks' || one.group === 'clicks'))
    Object.assign(figures, attackFigures(one, material, output))
  if (one.group === 'clips') Object.assign(figures, clipFigures(one, sound, output))
  if (!isShifted && one.group !== 'tones' && one.group !== 'clicks')
    figures.distance = spectralDistance(sound, output, one.speed, one.group === 'clips' ? 40 : 50)
  return { ...figures, ...measureWhole(sound, output, one.speed) }
}
