// The drummer: a ride cymbal with its skips, hi-hat on 2 and 4, a feathered bass drum, an answer now and then.
import { type Clock, swung } from './clock'
import type { TakePlan } from './demo-types'
import { levelAt } from './dynamics'
import { type Random, randomFrom } from './random'

export interface Hit {
  sec: number
  key: number
  velocity: number
}

/** General MIDI percussion keys; 39 and 40 are the slap and the swirl of a brush kit. */
const key = {
  kick: 36,
  stick: 37,
  snare: 38,
  slap: 39,
  swirl: 40,
  pedal: 44,
  crash: 49,
  ride: 51,
  bell: 53,
  lowTom: 45,
  midTom: 47,
  highTom: 50
}

/** Beat from 0, key, velocity. */
type Stroke = [number, number, number]

export function drumHits(plan: TakePlan, clock: Clock): Hit[] {
  const random = randomFrom(`${plan.slug} drums`)
  const hits: Hit[] = []
  const strike = (bar: number, strokes: Stroke[], scatter: number) => {
    for (const [beats, struck, velocity] of strokes)
      hits.push({
        sec: clock.sec(bar, swung(beats, plan.swing)) + scatter * random.normal(),
        key: struck,
        velocity: Math.round(Math.min(118, Math.max(12, velocity + 0.6 * levelAt(plan, bar) - 4 + 4 * random.normal())))
      })
  }
  if (plan.countIn) {
    const beats = Array.from({ length: clock.beatsInBar }, (_, beat) => beat)
    strike(
      0,
      beats.map((beat) => [beat, key.stick, beat === 0 ? 92 : 80]),
      0.002
    )
  }
  const { drums } = plan
  if (!drums) return hits
  for (let bar = 1; bar <= Math.min(drums.until, clock.lastBar); bar++) {
    const twoFeel = drums.twoFeel && bar >= drums.twoFeel[0] && bar <= drums.twoFeel[1]
    const pattern = drums.style === 'brushes' ? brushes(random) : ride(random, !!twoFeel)
    const top = plan.form.some((mark) => mark.bar === bar && mark.newPass)
    strike(bar, bar % 8 === 0 ? fill(random, drums.style) : pattern, 0.004)
    if (top && bar > 1) strike(bar, [[0, drums.style === 'brushes' ? key.ride : key.crash, 74]], 0.003)
  }
  if (drums.until <= clock.lastBar)
    strike(
      drums.until,
      [
        [0, key.ride, 80],
        [0, key.kick, 70]
      ],
      0.003
    )
  return hits
}

function ride(random: Random, twoFeel: boolean): Stroke[] {
  const strokes: Stroke[] = [
    [0, key.ride, 74],
    [1, key.ride, 86],
    [2, key.ride, 74],
    [3, key.ride, 86],
    [1, key.pedal, 78],
    [3, key.pedal, 78]
  ]
  if (random.next() < 0.75) strokes.push([1.5, key.ride, 58])
  if (random.next() < 0.85) strokes.push([3.5, key.ride, 60])
  for (const beat of twoFeel ? [0, 2] : [0, 1, 2, 3]) strokes.push([beat, key.kick, 34])
  const answer = random.next()
  if (answer < 0.22) strokes.push([1.5, key.snare, 46])
  else if (answer < 0.4) strokes.push([3.5, key.snare, 52])
  else if (answer < 0.52) strokes.push([2 + 2 / 3, key.snare, 40], [3, key.stick, 56])
  else if (answer < 0.6) strokes.push([3.5, key.kick, 62])
  return strokes
}

function brushes(random: Random): Stroke[] {
  const strokes: Stroke[] = [
    [0, key.swirl, 52],
    [1, key.snare, 66],
    [2, key.swirl, 50],
    [3, key.snare, 68],
    [1, key.pedal, 70],
    [3, key.pedal, 72]
  ]
  if (random.next() < 0.7) strokes.push([1.5, key.snare, 38])
  if (random.next() < 0.75) strokes.push([3.5, key.snare, 40])
  if (random.next() < 0.2) strokes.push([2.5, key.slap, 44])
  return strokes
}

function fill(random: Random, style: 'ride' | 'brushes'): Stroke[] {
  const tom = style === 'brushes' ? key.snare : random.pick([key.highTom, key.midTom])
  return [
    [0, style === 'brushes' ? key.swirl : key.ride, 66],
    [1, key.pedal, 76],
    [1, key.snare, 60],
    [2, key.snare, 52],
    [2 + 1 / 3, key.snare, 44],
    [2 + 2 / 3, tom, 66],
    [3, key.pedal, 76],
    [3, tom, 72],
    [3.5, style === 'brushes' ? key.slap : key.lowTom, 70],
    [0, key.kick, 44]
  ]
}
