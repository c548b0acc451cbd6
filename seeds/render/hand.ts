// From the written line to the played one: placement, length and weight of each note.
import type { Rational } from '@shared/timing/types'
import { type Clock, swung } from './clock'
import type { DemoNote, TakePlan } from './demo-types'
import { levelAt } from './dynamics'
import { readLine, type WrittenNote } from './line-text'
import { randomFrom } from './random'

export interface PlayedNote {
  note: DemoNote
  velocity: number
}

const value = ({ n, d }: Rational) => n / d
const rounded = (sec: number) => Math.round(sec * 1e4) / 1e4
/** A string is damped this long before the next note. */
const gapSec = 0.006

export function playLine(plan: TakePlan, clock: Clock): PlayedNote[] {
  const { hand, swing, slug } = plan
  const random = randomFrom(`${slug} hand`)
  const written = readLine(plan.bars, plan.firstBar, clock.beatsInBar)
  // First-order wandering with a memory of about eight notes.
  const memory = Math.exp(-1 / 8)
  let wander = 0
  const onsets = written.map((note) => {
    wander = memory * wander + Math.sqrt(1 - memory ** 2) * hand.wanderMs * random.normal()
    const late = hand.late[note.bar] ?? 0
    const shiftMs = hand.leanMs + wander + hand.scatterMs * random.normal() + late * (0.85 + 0.3 * random.next())
    return clock.sec(note.bar, swung(value(note.beat) - 1, swing)) + shiftMs / 1000
  })
  return written.flatMap((note, index) => {
    const onsetSec = onsets[index] ?? 0
    const end = clock.sec(note.bar, swung(value(note.beat) - 1 + value(note.lengthBeats), swing))
    const share = note.ghost ? 0.42 : hand.legato + 0.03 * random.normal()
    const offsetSec = Math.min(
      onsetSec + Math.max(0.05, (end - onsetSec) * Math.min(share, 0.99)),
      (onsets[index + 1] ?? Number.POSITIVE_INFINITY) - gapSec
    )
    const velocity = weightOf(plan, note, clock, random.normal())
    return note.midis.map((midi) => ({
      velocity,
      note: {
        onsetSec: rounded(onsetSec),
        offsetSec: rounded(offsetSec),
        midi,
        bar: note.bar,
        beat: note.beat,
        lengthBeats: note.lengthBeats,
        ...(note.ghost ? { ghost: true as const } : {})
      }
    }))
  })
}

/** Velocity: the phrase's level; 2 and 4 (in three: the 1) weigh more, high notes a little more. */
function weightOf(plan: TakePlan, note: WrittenNote, clock: Clock, chance: number): number {
  const beats = value(note.beat) - 1
  const backBeat = clock.beatsInBar === 4 ? (beats % 2 === 1 ? 4 : 0) : beats === 0 ? 6 : -3
  const offBeat = Number.isInteger(beats) ? 0 : -7
  const height = ((note.midis.at(-1) ?? 36) - 36) * 0.25
  const weight =
    plan.hand.velocity +
    levelAt(plan, note.bar, beats, clock.beatsInBar) +
    backBeat +
    offBeat +
    height +
    (note.accent ? 12 : 0) -
    (note.ghost ? 38 : 0) +
    3.5 * chance
  return Math.round(Math.min(122, Math.max(note.ghost ? 28 : 45, weight)))
}
