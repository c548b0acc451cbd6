// A take cut into pieces that can each be decoded alone and joined without a seam.

/** One piece. Decode the file, drop `preroll` frames, take `frames`: they are the take's from `firstSample` on. */
export type Piece = {
  /** Frame of the take at which this piece's own sound begins. */
  firstSample: number
  /** Frames (samples per channel) of its own. */
  frames: number
  /** Frames to drop from the front of the decoded file: the decoder settles there. */
  preroll: number
  /** Frames the decoder gives for the file; another count means this decoder trims and cannot be trusted. */
  decodedFrames: number
  bytes: number
  /** Name of the file inside the take's folder of pieces. */
  file: string
}

/** All counts are at `sampleRate`: decode in an (offline) audio context of that rate, or they will not fit. */
export type PieceManifest = {
  sampleRate: number
  channels: number
  totalFrames: number
  mime: string
  pieces: Piece[]
}

/** Indices of the pieces that hold the frames `from` to `to` (half-open). Pieces lie in order without gaps. */
export const piecesBetween = (manifest: PieceManifest, from: number, to: number): number[] =>
  manifest.pieces.flatMap((piece, index) =>
    piece.firstSample < to && piece.firstSample + piece.frames > from ? [index] : []
  )
