// A tapper with a known truth: late by a lag, 20 ms of jitter at the wall, beats left out, bounces, a tempo that drifts.

export interface Tapper {
  seed: number
  /** Seconds of the take between two beats. */
  periodSec: number
  beats: number
  /** Largest change of tempo: 0.03 is 3 %. */
  drift: number
  rate: number
  lagSec: number
  jitterSec: number
  missed: number
  doubled: number
}

export interface Tapped {
  truth: number[]
  taps: number[]
  /** Beat (from 0) each tap was meant for; null for a bounce. */
  meant: (number | null)[]
}

// Congruential generator with the constants of "Numerical Recipes" (Press et al.), from memory.
const seeded = (seed: number) => {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return state / 2 ** 32
  }
}

/** The first two beats are always tapped, once. */
export const simulateTaps = (overrides: Partial<Tapper>): Tapped => {
  const tapper: Tapper = {
    seed: 1,
    periodSec: 0.5,
    beats: 96,
    drift: 0.03,
    rate: 1,
    lagSec: 0.08,
    jitterSec: 0.02,
    missed: 0.04,
    doubled: 0.03,
    ...overrides
  }
  const random = seeded(tapper.seed * 7919)
  const normal = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())
  const truth: number[] = []
  const events: { sec: number; meant: number | null }[] = []
  let sec = 2
  for (let beat = 0; beat < tapper.beats; beat += 1) {
    truth.push(sec)
    const tapSec = sec + (tapper.lagSec + tapper.jitterSec * normal()) * tapper.rate
    const isSure = beat < 2
    if (isSure || random() >= tapper.missed) {
      events.push({ sec: tapSec, meant: beat })
      if (!isSure && random() < tapper.doubled) {
        events.push({ sec: tapSec + (0.06 + 0.05 * random()) * tapper.rate, meant: null })
      }
    }
    sec += tapper.periodSec * (1 + tapper.drift * Math.sin((2 * Math.PI * beat) / tapper.beats))
  }
  events.sort((a, b) => a.sec - b.sec)
  return { truth, taps: events.map((event) => event.sec), meant: events.map((event) => event.meant) }
}
