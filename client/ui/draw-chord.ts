// The canvas twin of chord-symbol.tsx: the same pieces at the same places.
import type { TypesetChord } from '@shared/music/chord-typeset'
import { chordRuns } from './chord-runs'
import type { ChordRun } from './chord-runs'
import { canvasFonts } from './tokens'

/** What is used of a 2D context, so that an OffscreenCanvas or a test's recorder will do. */
export type ChordContext = Pick<
  CanvasRenderingContext2D,
  'font' | 'fillStyle' | 'textBaseline' | 'textAlign' | 'measureText' | 'fillText'
>

export interface DrawChordOptions {
  /** Regular weight, as for the chord of a repeated bar (colour: the `faint` token). */
  faint?: boolean
}

const fontOf = (run: ChordRun, size: number, faint: boolean) =>
  `${faint ? 400 : run.weight} ${(run.scale * size).toFixed(2)}px ${canvasFonts[run.face]}`

function walk(
  ctx: ChordContext,
  chord: TypesetChord,
  size: number,
  faint: boolean,
  visit: (run: ChordRun, offset: number) => void
): number {
  let offset = 0
  for (const run of chordRuns(chord)) {
    ctx.font = fontOf(run, size, faint)
    offset += run.gap * size
    visit(run, offset)
    offset += ctx.measureText(run.text).width
  }
  return offset
}

/** Width in the context's units; `size` is the root's font size. */
export const measureChord = (
  ctx: ChordContext,
  chord: TypesetChord,
  size: number,
  options: DrawChordOptions = {}
): number => walk(ctx, chord, size, options.faint ?? false, () => undefined)

/** Draws with the left edge at `x` and the root standing on `y`; returns the width. Wait for `fontsReady` first. */
export function drawChord(
  ctx: ChordContext,
  chord: TypesetChord,
  x: number,
  y: number,
  size: number,
  colour: string,
  options: DrawChordOptions = {}
): number {
  ctx.fillStyle = colour
  ctx.textAlign = 'left'
  ctx.textBaseline = 'alphabetic'
  return walk(ctx, chord, size, options.faint ?? false, (run, offset) =>
    ctx.fillText(run.text, x + offset, y - run.rise * size)
  )
}
