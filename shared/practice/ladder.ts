// A loop that gets faster: the sentence "60 % to 100 %, up 5 after 4 times" and what it means pass by pass.

/** Rates are shares of full speed (0.6 is 60 %). `step` may be negative where the loop gets slower. */
export interface SpeedLadder {
  from: number
  to: number
  step: number
  /** Passes at one rate. */
  every: number
}

/** Rates as shares of full speed; `every` is a whole number from 1. */
export const ladderLimits = { minRate: 0.2, maxRate: 1.5, maxEvery: 99 }

/** Rate of the pass with this index (from 0); stays at `to` once it is reached. */
export const ladderRate = (ladder: SpeedLadder, pass: number): number => {
  const climbed = ladder.from + ladder.step * Math.floor(pass / ladder.every)
  const bounded = ladder.step >= 0 ? Math.min(ladder.to, climbed) : Math.max(ladder.to, climbed)
  return Math.round(bounded * 1000) / 1000
}

/** The sentence: `60 % to 100 %, up 5 after 4 times`, `100 % to 70 %, down 2.5 after each time`. */
export const ladderWords = ({ from, to, step, every }: SpeedLadder): string =>
  `${percent(from)} % to ${percent(to)} %, ${step < 0 ? 'down' : 'up'} ${percent(Math.abs(step))} after ${
    every === 1 ? 'each time' : `${every} times`
  }`

/** A share in percent, to the tenth. */
const percent = (share: number): number => Math.round(share * 1000) / 10
