// Bar maps with a steady beat, for what is laid along them.
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { createBarGrid } from '@shared/timing/bar-grid'
import type { MeterMark } from '@shared/timing/types'
import { meter } from '../timing/random-bar-map'

/** Bar 1 at `startSec`, felt beats of `beatSec` in the first meter; later meters keep the lower figure's length. */
export const plainMap = (text: string, beatSec = 0.5, startSec = 0, later: MeterMark[] = []): BarMap => {
  const meters = [{ bar: 1, meter: meter(text) }, ...later]
  const grid = createBarGrid(meters)
  const far = { bar: 101, beat: { n: 1, d: 1 } }
  const { lower, pulse } = meter(text)
  const endSec = startSec + (grid.wholeNotesAt(far) * lower * beatSec) / pulse
  const map = createBarMap({
    anchors: [
      { id: 'a', sec: startSec, position: { bar: 1, beat: { n: 1, d: 1 } } },
      { id: 'b', sec: endSec, position: far }
    ],
    meters,
    marks: []
  })
  if (!map) throw new Error('no sound bar map')
  return map
}
