// Which pieces of a long take have to be here, the most urgent first.
import type { PieceManifest } from '../piece-manifest.ts'

export interface Want {
  placeFrame: number
  /** The loop that is being played round, if the place will come to its end. */
  loop: { startFrame: number; endFrame: number } | null
  /** Frames of the take to have ahead along the way, turns counted; and behind for a short step back. */
  aheadFrames: number
  behindFrames: number
  /** Frames around every place that the stretcher looks at. */
  marginFrames: number
  /** Never more pieces than this. */
  most: number
}

type Shape = Pick<PieceManifest, 'totalFrames'> & {
  pieces: readonly { firstSample: number; frames: number }[]
}

/** Indices in the order in which they are needed: along the way with its turns, then the rest of the loop, then what lies behind. */
export const wantedPieces = ({ pieces, totalFrames }: Shape, want: Want): number[] => {
  const wanted = new Set<number>()
  const addSpan = (from: number, to: number): void => {
    pieces.forEach((piece, index) => {
      if (piece.firstSample < to && piece.firstSample + piece.frames > from) wanted.add(index)
    })
  }
  const { loop, marginFrames: margin } = want
  const place = Math.max(0, Math.min(want.placeFrame, totalFrames - 1))
  const turnsAt = loop && place < loop.endFrame ? loop.endFrame : Infinity
  addSpan(place, place + 1)
  addSpan(place - margin, place + margin)
  const end = place + want.aheadFrames
  addSpan(place, Math.min(end, turnsAt + margin))
  if (loop && turnsAt !== Infinity) {
    const left = end - turnsAt
    if (left > 0) addSpan(loop.startFrame - margin, Math.min(loop.startFrame + left, loop.endFrame + margin))
    // Its beginning is always kept, so that it can turn whatever happens to the line.
    addSpan(loop.startFrame - margin, loop.startFrame + margin)
    addSpan(loop.startFrame, loop.endFrame + margin)
  }
  addSpan(place - want.behindFrames, place)
  return [...wanted].slice(0, want.most)
}
