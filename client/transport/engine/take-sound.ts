// Where the engine's samples come from: the pieces of a kept take, or a short file of this browser decoded whole.
import { parseAnswer, problemOf } from '@client/lib/api'
import type { Page } from '@shared/audio/playback/page-store'
import { takeRoutes, type PiecesManifest } from '@shared/contracts/takes'
import { PieceFault } from './piece-fault'

/** The rate that the engine works at when nothing says otherwise; that of Opus and of most devices. */
export const engineRate = 48_000
/** Decoded whole up to this length: eight minutes of stereo are 184 MB of samples. */
export const longestWholeSec = 480
/** A whole file is handed over in pages of this many frames. */
const wholePageFrames = 10 * engineRate

export type Decode = (bytes: ArrayBuffer, sampleRate: number) => Promise<AudioBuffer>

/** Decodes at the rate given, whatever the device's is: pieces joined at their own rate have no seams. */
export const decodeInBrowser: Decode = (bytes, sampleRate) =>
  new OfflineAudioContext(2, 1, sampleRate).decodeAudioData(bytes)

/** Answers that mean "later"; everything else the server refuses for good. */
const isForNow = (status: number): boolean => status >= 500 || status === 429 || status === 408

const get = async (url: string, signal: AbortSignal): Promise<Response> => {
  let response: Response
  try {
    response = await fetch(url, { signal, credentials: 'same-origin' })
  } catch {
    throw new PieceFault('The server cannot be reached.', true)
  }
  if (response.ok) return response
  throw new PieceFault(problemOf(response.status, await response.text()).message, isForNow(response.status))
}

const bytesOf = async (response: Response): Promise<ArrayBuffer> => {
  try {
    return await response.arrayBuffer()
  } catch {
    throw new PieceFault('The line broke.', true)
  }
}

export const fetchManifest = async (url: string, signal: AbortSignal): Promise<PiecesManifest> => {
  const text = new TextDecoder().decode(await bytesOf(await get(url, signal)))
  return parseAnswer(takeRoutes.pieces, JSON.parse(text))
}

/** Fetches and decodes one piece, without its pre-roll. */
export const pieceLoader =
  (manifest: PiecesManifest, decode: Decode = decodeInBrowser) =>
  async (index: number, signal: AbortSignal): Promise<Page> => {
    const piece = manifest.pieces[index]
    if (!piece) throw new PieceFault('There is no such piece.', false)
    const bytes = await bytesOf(await get(piece.url, signal))
    const sound = await decode(bytes, manifest.sampleRate).catch(() => {
      throw new PieceFault('This browser cannot decode the pieces of this recording.', false)
    })
    // A decoder that trims or pads in its own way would shift everything: better the plain element than wrong places.
    if (sound.length !== piece.decodedFrames || sound.numberOfChannels < manifest.channels)
      throw new PieceFault('This browser decodes the pieces of this recording differently.', false)
    return {
      firstFrame: piece.firstSample,
      channels: Array.from({ length: manifest.channels }, (_, channel) =>
        sound.getChannelData(channel).slice(piece.preroll, piece.preroll + piece.frames)
      )
    }
  }

export interface WholeSound {
  sampleRate: number
  channels: number
  totalFrames: number
  pages: Page[]
}

/** A short file, decoded at once. */
export const decodeWhole = async (file: Blob, decode: Decode = decodeInBrowser): Promise<WholeSound> => {
  const sound = await decode(await file.arrayBuffer(), engineRate).catch(() => {
    throw new PieceFault('This browser cannot decode this recording.', false)
  })
  const channels = Math.min(2, sound.numberOfChannels)
  const pages = Array.from({ length: Math.ceil(sound.length / wholePageFrames) }, (_, index) => {
    const firstFrame = index * wholePageFrames
    return {
      firstFrame,
      channels: Array.from({ length: channels }, (_each, channel) =>
        sound.getChannelData(channel).slice(firstFrame, firstFrame + wholePageFrames)
      )
    }
  })
  return { sampleRate: engineRate, channels, totalFrames: sound.length, pages }
}
