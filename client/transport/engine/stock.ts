// The samples of a source behind one face, whether it is kept in pieces or a short file of this browser.
import type { Page } from '@shared/audio/playback/page-store'
import type { PlayerSource } from '../player'
import { createPieceWindow } from './piece-window'
import { PieceFault } from './piece-fault'
import { decodeWhole, fetchManifest, longestWholeSec, pieceLoader } from './take-sound'

export interface StockEvents {
  put(index: number, page: Page): void
  drop(index: number): void
  /** True while pieces cannot be fetched though they should be. */
  onTrouble(isTrouble: boolean): void
  /** It will not get better. */
  onFault(message: string): void
}

export interface Stock {
  readonly sampleRate: number
  readonly channels: number
  readonly totalFrames: number
  /** Where it plays, in frames; fetches what is needed from there and lets go what is not. */
  look(placeFrame: number, loop: { startFrame: number; endFrame: number } | null, isPlaying: boolean): void
  hasPlace(frame: number): boolean
  /** To a worklet that knows nothing yet. */
  sendAgain(): void
  readonly heldBytes: number
  readonly heldPieces: readonly number[]
  dispose(): void
}

const openPieces = async (url: string, signal: AbortSignal, events: StockEvents): Promise<Stock> => {
  const manifest = await fetchManifest(url, signal)
  const window = createPieceWindow({ manifest, load: pieceLoader(manifest), ...events })
  const { sampleRate, channels, totalFrames } = manifest
  return {
    sampleRate,
    channels,
    totalFrames,
    look: window.look,
    hasPlace: (frame) => {
      const index = manifest.pieces.findLastIndex(({ firstSample }) => firstSample <= frame)
      return window.heldPieces.includes(index)
    },
    sendAgain: window.forget,
    get heldBytes() {
      return window.heldBytes
    },
    get heldPieces() {
      return window.heldPieces
    },
    dispose: window.dispose
  }
}

const openWhole = async (file: Blob, events: StockEvents): Promise<Stock> => {
  const sound = await decodeWhole(file)
  const { sampleRate, channels, totalFrames } = sound
  let pages: Page[] | null = sound.pages
  let isOver = false
  const send = (given: Page[]): void => given.forEach((page, index) => events.put(index, page))
  return {
    sampleRate,
    channels,
    totalFrames,
    look: () => undefined,
    hasPlace: () => true,
    // Handed over, not copied: a worklet made anew has it decoded anew.
    sendAgain: () => {
      if (pages) send(pages)
      else void decodeWhole(file).then((again) => isOver || send(again.pages))
      pages = null
    },
    heldBytes: totalFrames * channels * 4,
    heldPieces: sound.pages.map((_, index) => index),
    dispose: () => {
      isOver = true
    }
  }
}

/** Rejects with a `PieceFault` where the source cannot be had now, or not in this way. */
export const openStock = async (source: PlayerSource, signal: AbortSignal, events: StockEvents): Promise<Stock> => {
  if (source.piecesUrl) return openPieces(source.piecesUrl, signal, events)
  if (!source.file) throw new PieceFault('There are no pieces of this recording.', false)
  if (source.durationSec > longestWholeSec) throw new PieceFault('This file is too long to be held whole.', false)
  return openWhole(source.file, events)
}
