// Counting in: clicks before the first sound, in the tempo of the place it starts at.
import type { BarMap } from '@shared/timing/bar-map'
import { pulseOf, pulsesPerBar } from '@shared/timing/meter'
import { toNumber } from '@shared/timing/rational'
import type { Sec } from '@shared/units'

/** `two bars` counts 1, 3, then 1 2 3 4. */
export type CountInChoice = 'none' | 'one bar' | 'two bars'

/** Seconds of real time: `leadSec` before the first sound it begins; clicks rise towards it and are negative. */
interface CountIn {
  leadSec: Sec
  clicks: { atSec: Sec; accent: 0 | 1 | 2 }[]
}

/** Nearer than this part of a beat to a beat the start is that beat: nobody counts a beat and its flam. */
const NEAR_BEATS = 1 / 8

/**
 * Clicks that lead into the place. One bar counts every felt beat; two bars count the first in halves (1 and 3 of four, 1 and 4
 * of six, otherwise 1 alone) and every beat of the second. A start within a bar is led into by that bar's own beats after the
 * counted ones (1 2 3 4, 1 2, in on 3), so that the first sound falls where it belongs; a start between two beats comes that
 * much after the last click. Tempo and meter are those of the place, at `rate`. Common practice, no source.
 * Null for 'none' and without a bar map.
 */
export const countInFor = (map: BarMap | null, startSec: Sec, rate: number, choice: CountInChoice): CountIn | null => {
  if (!map || choice === 'none' || !(rate > 0)) return null
  const { count, startBeats, tempoSec } = placeOf(map, startSec)
  const beatSec = 60 / map.tempoAt(tempoSec) / rate
  const bars = choice === 'one bar' ? 1 : 2
  const firstBeat = -bars * count
  const clicks: CountIn['clicks'] = []
  for (let beat = firstBeat; beat < startBeats - NEAR_BEATS; beat += 1) {
    const inBar = ((beat % count) + count) % count
    if (bars === 2 && beat < -count && !isHalf(inBar, count)) continue
    clicks.push({ atSec: (beat - startBeats) * beatSec, accent: inBar === 0 ? 2 : 1 })
  }
  return { leadSec: (startBeats - firstBeat) * beatSec, clicks }
}

/** Felt beats from the bar's line to the start (a shade under 0 just before the line), and beats in that bar. */
const placeOf = (map: BarMap, startSec: Sec) => {
  const position = map.positionAt(startSec)
  const meter = map.meterAt(position.bar)
  const startBeats = toNumber(pulseOf(position, meter)) - 1
  const left = pulsesPerBar(meter) - startBeats
  if (left >= NEAR_BEATS) return { count: pulsesPerBar(meter), startBeats, tempoSec: startSec }
  const next = position.bar + 1
  return { count: pulsesPerBar(map.meterAt(next)), startBeats: -left, tempoSec: map.barSec(next) }
}

const isHalf = (beat: number, count: number): boolean =>
  beat === 0 || (count >= 4 && count % 2 === 0 && beat === count / 2)
