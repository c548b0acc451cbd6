// Tries that were recorded and neither kept nor thrown away: the samples in pieces of a second, and where the tries lie in them.
import type { TryCut } from '@shared/practice/over-recording'
import { wavHeader, wavHeaderBytes, wavSampleBytes } from '@shared/audio/wav'
import { createPieceStore, type PieceStore } from '@client/lib/piece-store'

export interface OneTry {
  /** The id of the take it becomes, so that sending it twice makes one. */
  id: string
  number: number
  cut: TryCut
  /** Kept or thrown away. */
  isGone: boolean
}

/** One recording, from the press of the button to the stop: in a loop every time through is a try. */
export interface Recorded {
  id: string
  ownerId: string
  takeId: string
  startedMs: number
  sampleRate: number
  channels: number
  /** Every piece but the last has `sampleRate` frames. */
  pieces: number
  frames: number
  tries: OneTry[]
}

export type TryStore = PieceStore<Recorded>

export const browserTryStore: TryStore = createPieceStore<Recorded>('plumbline-tries')

/** A try as a file; null when a piece of it is missing. */
export const fileOfTry = async (
  { id, sampleRate, channels }: Recorded,
  { cut: { fromFrame, frames } }: OneTry,
  name: string,
  store: Pick<TryStore, 'piece'>
): Promise<File | null> => {
  const frameBytes = channels * wavSampleBytes
  const [first, last] = [Math.floor(fromFrame / sampleRate), Math.floor((fromFrame + frames - 1) / sampleRate)]
  const parts: Blob[] = []
  for (let index = first; index <= last; index += 1) {
    const piece = await store.piece(id, index)
    if (!piece) return null
    const from = Math.max(0, fromFrame - index * sampleRate)
    const to = Math.min(sampleRate, fromFrame + frames - index * sampleRate)
    const part = piece.slice(wavHeaderBytes + from * frameBytes, wavHeaderBytes + to * frameBytes)
    if (part.size !== (to - from) * frameBytes) return null
    parts.push(part)
  }
  return new File([wavHeader(sampleRate, channels, frames), ...parts], `${name}.wav`, { type: 'audio/wav' })
}
