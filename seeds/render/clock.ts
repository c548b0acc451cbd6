// The pulse of a take: the bars' true places in time, before anybody plays ahead of or behind it.
import type { TakePlan } from './demo-types'
import { randomFrom } from './random'

export interface Clock {
  beatsInBar: number
  /** Bars on the clock: from `firstBar` to `lastBar`, and the bar line that closes the last one. */
  firstBar: number
  lastBar: number
  barSec(bar: number): number
  /** Seconds of a place; `beats` from 0 within the bar, and past its end for what hangs over. */
  sec(bar: number, beats: number): number
}

/** Tempo wanders by about one per cent in two slow waves and a little from bar to bar; inside a bar it is steady. */
export function clockOf(plan: TakePlan): Clock {
  const random = randomFrom(`${plan.slug} clock`)
  const beatsInBar = Number.parseInt(plan.tune.chart.meter, 10)
  const phases = [random.next(), random.next()] as const
  const lines = [plan.leadSec]
  const { bpm, creep, stretch } = plan.tempo
  plan.bars.forEach((_, index) => {
    const wave =
      0.006 * Math.sin(2 * Math.PI * (index / 11 + phases[0])) +
      0.006 * Math.sin(2 * Math.PI * (index / 29 + phases[1]))
    const tempo = bpm * (1 + (creep * index) / plan.bars.length + wave + 0.0015 * random.normal())
    const barSec = ((60 * beatsInBar) / tempo) * (stretch[plan.firstBar + index] ?? 1)
    lines.push((lines.at(-1) ?? 0) + barSec)
  })
  const lastBar = plan.firstBar + plan.bars.length - 1
  const barSec = (bar: number) => {
    const sec = lines[bar - plan.firstBar]
    if (sec === undefined) throw new Error(`${plan.slug}: no bar ${bar}`)
    return sec
  }
  const sec = (bar: number, beats: number): number => {
    if (beats >= beatsInBar && bar < lastBar) return sec(bar + 1, beats - beatsInBar)
    if (beats < 0 && bar > plan.firstBar) return sec(bar - 1, beats + beatsInBar)
    const from = barSec(bar)
    return from + ((barSec(bar + 1) - from) * beats) / beatsInBar
  }
  return { beatsInBar, firstBar: plan.firstBar, lastBar, barSec, sec }
}

/** Moves the off-beat eighth to where it is swung; triplets and beats stay. `beats` from 0. */
export function swung(beats: number, swing: number): number {
  const whole = Math.floor(beats + 1e-9)
  return Math.abs(beats - whole - 0.5) < 1e-9 ? whole + swing : beats
}
