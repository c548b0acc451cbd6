// Which bar lines, numbers and beats there is room for in a window of the take.
import type { BarMap } from '@shared/timing/bar-map'
import type { BarIndex } from '@shared/units'
import { labelStep, scaleOf, visibleSpan, type View } from './geometry'

export interface BarMark {
  bar: BarIndex
  /** Pixels from the start of the take. */
  x: number
  width: number
  hasNumber: boolean
  /** Felt beats after the first, in pixels from the start of the take; empty where they would crowd. */
  beats: number[]
}

const lineRoomPx = 14
const numberRoomPx = 30
const beatRoomPx = 14

/** Bars of the view and half of one more on each side. Every fourth or eighth only, where single bars are too narrow. */
export const barMarks = (view: View, barMap: BarMap): BarMark[] => {
  const scale = scaleOf(view)
  const bars = barMap.barsIn(visibleSpan(view, view.widthPx / 2))
  const [first, last] = [bars[0], bars.at(-1)]
  if (first === undefined || last === undefined || scale === 0) return []
  const whole = barMap.barsSpan(first, last)
  const meanPx = ((whole.endSec - whole.startSec) * scale) / bars.length
  const lineEvery = labelStep(meanPx, lineRoomPx)
  const numberEvery = labelStep(meanPx, numberRoomPx)
  return bars
    .filter((bar) => isNth(bar, lineEvery))
    .map((bar) => {
      const { startSec, endSec } = barMap.barSpan(bar)
      const beats = barMap.beatsOf(bar)
      const hasBeats = ((endSec - startSec) * scale) / beats.length >= beatRoomPx
      return {
        bar,
        x: startSec * scale,
        width: (endSec - startSec) * scale,
        hasNumber: isNth(bar, numberEvery),
        beats: hasBeats ? beats.slice(1).map(({ sec }) => sec * scale) : []
      }
    })
    .filter(({ x }) => x >= 0)
}

/** Bars 1, 5, 9 … of four: phrases start there. */
const isNth = (bar: BarIndex, step: number): boolean => (((bar - 1) % step) + step) % step === 0
