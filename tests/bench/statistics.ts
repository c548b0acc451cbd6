// The few statistics that the figures are made of. The median itself is shared/timing/statistics.ts.
import { median } from '@shared/timing/statistics'

/** The value that `share` (0-1) of the values do not exceed, by nearest rank: always one of the values. NaN for none. */
export const percentile = (values: readonly number[], share: number): number => {
  const sorted = [...values].sort((a, b) => a - b)
  const rank = Math.ceil(Math.min(1, Math.max(0, share)) * sorted.length)
  return sorted[Math.max(0, rank - 1)] ?? NaN
}

/** NaN for an empty list. */
export const middle = (values: readonly number[]): number => median(values) ?? NaN

export interface Pairs {
  ours: number[]
  peer: number[]
}

/** Median of the ratios within the pairs: load that hits both alike falls out. */
export const pairRatio = ({ ours, peer }: Pairs): number =>
  middle(ours.slice(0, peer.length).map((value, i) => value / (peer[i] as number)))

/** Measures both by turns, and each first in every other pair. */
export const inPairs = async (
  count: number,
  ours: (round: number) => Promise<number>,
  peer: (round: number) => Promise<number>
): Promise<Pairs> => {
  const pairs: Pairs = { ours: [], peer: [] }
  for (let round = 0; round < count; round += 1) {
    const peerFirst = round % 2 === 1
    if (peerFirst) pairs.peer.push(await peer(round))
    pairs.ours.push(await ours(round))
    if (!peerFirst) pairs.peer.push(await peer(round))
  }
  return pairs
}
