// One ink, both sides of the playhead. Draws a stretch of the take into a canvas; holds no state.
import type { Sec } from '@shared/units'
import { clamp } from './geometry'
import { levelFor, rangeBetween, type PeaksSource } from './peaks-source'

export interface WaveformModel {
  peaks: PeaksSource
  /** The take's second at the canvas's left edge. */
  startSec: Sec
  /** Seconds per device pixel. */
  secPerPx: number
  /** Linear gain, so that the drawing shows what is heard. */
  gain: number
  ink: string
}

type Brush = Pick<
  CanvasRenderingContext2D,
  'fillStyle' | 'fillRect' | 'beginPath' | 'moveTo' | 'lineTo' | 'closePath' | 'fill'
>

/** Never thinner than this, so that silence is still a line. */
const thinnestPx = 1

export const drawWaveform = (ctx: Brush, width: number, height: number, model: WaveformModel): void => {
  const level = levelFor(model.peaks, model.secPerPx)
  ctx.fillStyle = model.ink
  const middle = height / 2
  if (!level) {
    ctx.fillRect(0, middle - thinnestPx / 2, width, thinnestPx)
    return
  }
  const yOf = (value: number) => middle - clamp(value * model.gain, -1, 1) * (middle - thinnestPx)
  if (level.secPerPair <= model.secPerPx) {
    for (let x = 0; x < width; x += 1) {
      const { min, max } = rangeBetween(
        level,
        model.startSec + x * model.secPerPx,
        model.startSec + (x + 1) * model.secPerPx
      )
      const top = yOf(max)
      ctx.fillRect(x, top, 1, Math.max(thinnestPx, yOf(min) - top))
    }
    return
  }
  // Nearer than the finest peaks: join them by straight lines instead of drawing steps.
  const first = Math.floor(model.startSec / level.secPerPair) - 1
  const last = Math.ceil((model.startSec + width * model.secPerPx) / level.secPerPair) + 1
  const xOf = (pair: number) => ((pair + 0.5) * level.secPerPair - model.startSec) / model.secPerPx
  const at = (pair: number, side: 0 | 1) => (level.pairs[pair * 2 + side] ?? 0) / level.fullScale
  ctx.beginPath()
  ctx.moveTo(xOf(first), yOf(at(first, 1)))
  for (let pair = first + 1; pair <= last; pair += 1) ctx.lineTo(xOf(pair), yOf(at(pair, 1)))
  for (let pair = last; pair >= first; pair -= 1) ctx.lineTo(xOf(pair), yOf(at(pair, 0)) + thinnestPx)
  ctx.closePath()
  ctx.fill()
}
