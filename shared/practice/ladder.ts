// A loop that gets faster: the sentence "60 % to 100 %, up 5 after 4 times" and what it means pass by pass.

/** Rates are shares of full speed (0.6 is 60 %). `step` may be negative where the loop gets slower. */
export interface SpeedLadder {
  from: number
  to: number
  step: number
  /** Passes at one rate. */
  every: number
}

/** Rate of the pass with this index (from 0); stays at `to` once it is reached. */
export const ladderRate = (ladder: SpeedLadder, pass: number): number => {
  const climbed = ladder.from + ladder.step * Math.floor(pass / ladder.every)
  const bounded = ladder.step >= 0 ? Math.min(ladder.to, climbed) : Math.max(ladder.to, climbed)
  return Math.round(bounded * 1000) / 1000
}
