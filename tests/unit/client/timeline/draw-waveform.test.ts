import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { drawWaveform } from '@client/timeline/draw-waveform'
import { levelFor, meanHeight, rangeBetween, type PeaksSource } from '@client/timeline/peaks-source'

/** Peaks of a take that is silent but for one loud pair at `loudAt`. */
const oneLoud = (pairs: number, loudAt: number, secPerPair: number) => {
  const data = new Int8Array(pairs * 2)
  data[loudAt * 2] = -127
  data[loudAt * 2 + 1] = 127
  return { secPerPair, pairs: data, fullScale: 127 }
}
const peaks: PeaksSource = { levels: [oneLoud(1000, 400, 0.01), oneLoud(100, 40, 0.1), oneLoud(10, 4, 1)] }

const recorder = () => {
  const rects: { x: number; y: number; w: number; h: number }[] = []
  const points: [number, number][] = []
  const nothing = () => {}
  const brush = {
    fillStyle: '',
    fillRect: (x: number, y: number, w: number, h: number) => void rects.push({ x, y, w, h }),
    moveTo: (x: number, y: number) => void points.push([x, y]),
    lineTo: (x: number, y: number) => void points.push([x, y]),
    beginPath: nothing,
    closePath: nothing,
    fill: nothing
  }
  return { rects, points, brush }
}

describe('levelFor', () => {
  it('takes the coarsest level that still has a pair for every pixel', () => {
    expect([2, 1, 0.5, 0.05, 0.001].map((secPerPx) => levelFor(peaks, secPerPx)?.secPerPair)).toEqual([
      1, 1, 0.1, 0.01, 0.01
    ])
  })

  it('gives none for a take without peaks', () => {
    expect(levelFor({ levels: [] }, 1)).toBeNull()
  })
})

describe('rangeBetween', () => {
  it('never misses a loud pair and never invents one, wherever the edges fall', () => {
    const level = oneLoud(1000, 400, 0.01)
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 10, noNaN: true }),
        fc.double({ min: 0.02, max: 3, noNaN: true }),
        (from, length) => {
          const { max } = rangeBetween(level, from, from + length)
          const isSurelyIn = from <= 4 && from + length >= 4.01
          const isSurelyOut = from > 4.02 || from + length < 3.99
          if (isSurelyIn) expect(max).toBe(1)
          if (isSurelyOut) expect(max).toBe(0)
        }
      )
    )
  })
})

describe('meanHeight', () => {
  it('is the mean of the heights, whatever level is read', () => {
    const flat = new Int8Array(200).map((_, index) => (index % 2 ? 64 : -64))
    expect(meanHeight({ levels: [{ secPerPair: 0.1, pairs: flat, fullScale: 128 }] }, 1, 3)).toBeCloseTo(0.5)
    expect(meanHeight(peaks, 5, 5)).toBe(0)
  })
})

describe('drawWaveform', () => {
  it('draws the loud place where it sounds, as high as the canvas allows, and silence as a thin line', () => {
    const { rects, brush } = recorder()
    drawWaveform(brush, 100, 80, { peaks, startSec: 3.5, secPerPx: 0.01, gain: 1, ink: 'black' })
    const tall = rects.filter(({ h }) => h > 2)
    expect(tall.every(({ x }) => x >= 49 && x <= 51)).toBe(true)
    expect(tall[0]?.h).toBeCloseTo(78)
    expect(rects.filter(({ h }) => h === 1).length).toBeGreaterThan(95)
  })

  it('never leaves the canvas, whatever the gain', () => {
    const { rects, brush } = recorder()
    drawWaveform(brush, 100, 80, { peaks, startSec: 3.5, secPerPx: 0.01, gain: 8, ink: 'black' })
    expect(rects.every(({ y, h }) => y >= 0 && y + h <= 80)).toBe(true)
  })

  it('joins the finest peaks by lines when looked at from nearer', () => {
    const { rects, points, brush } = recorder()
    drawWaveform(brush, 400, 80, { peaks, startSec: 3.99, secPerPx: 0.0001, gain: 1, ink: 'black' })
    expect(rects).toHaveLength(0)
    const highest = points.reduce((best, point) => (point[1] < best[1] ? point : best))
    expect(highest[0]).toBeCloseTo(150)
  })
})
