// A player and an input that run on one clock turned by hand: what jsdom has none of.
import type { Capture, CapturedBlock } from '@client/features/over-recording/capture'
import type { Recorded, TryStore } from '@client/features/over-recording/try-store'
import { createEmitter } from '@client/transport/emitter'
import type { Player, PlayerEvents } from '@client/transport/player'
import { createStillPlayer } from '../timeline/still-player'

export const sampleRate = 1000
const blockFrames = 80

export interface FakeInput {
  player: Player
  capture: Capture
  /** Lets so many seconds pass; the input hears `sound(clock)`. */
  run(seconds: number): void
}

/** The player counts in for a second, then plays from `startSec`, round and round to `endSec` where there is one. */
export const createFakeInput = (options: {
  startSec: number
  endSec: number | null
  rate: number
  /** The player's clock less the capture's. */
  offsetSec: number
  sound: (clockSec: number) => number
}): FakeInput => {
  const { startSec, endSec, rate, offsetSec, sound } = options
  const events = createEmitter<PlayerEvents>()
  const listeners = new Set<(block: CapturedBlock) => void>()
  let captureFrame = 5000
  let begun: number | null = null
  let isPlaying = false
  let stoodAt = startSec
  const clock = (): number => captureFrame / sampleRate + offsetSec
  const placeAt = (at: number): number => {
    if (!isPlaying || begun === null) return stoodAt
    const played = Math.max(0, at - begun - 1) * rate
    return startSec + (endSec === null ? played : played % (endSec - startSec))
  }
  const player: Player = Object.assign(createStillPlayer(100), {
    clock,
    positionAt: placeAt,
    play: async () => {
      begun = clock()
      isPlaying = true
      events.emit('state', 'playing')
      return true
    },
    pause: () => {
      stoodAt = placeAt(clock())
      isPlaying = false
    },
    on: events.on
  })
  Object.defineProperty(player, 'state', { get: () => (isPlaying ? 'playing' : 'ready') })
  Object.defineProperty(player, 'rate', { get: () => rate })
  return {
    player,
    capture: {
      sampleRate,
      channels: 1,
      heard: () => captureFrame / sampleRate,
      roughDelaySec: () => 0.05,
      onBlock: (listener) => {
        listeners.add(listener)
        return () => void listeners.delete(listener)
      },
      flush: async () => undefined,
      dispose: () => listeners.clear()
    },
    run: (seconds) => {
      for (let left = Math.round(seconds * sampleRate); left > 0; left -= blockFrames) {
        const frame = captureFrame
        const channel = Float32Array.from({ length: blockFrames }, (_, n) =>
          sound((frame + n) / sampleRate + offsetSec)
        )
        captureFrame += blockFrames
        for (const listener of listeners) listener({ frame, channels: [channel] })
      }
    }
  }
}

export interface MemoryStore extends TryStore {
  begun: Map<string, Recorded>
  pieces: Map<string, Blob>
}

export const createMemoryStore = (): MemoryStore => {
  const begun = new Map<string, Recorded>()
  const pieces = new Map<string, Blob>()
  return {
    begun,
    pieces,
    putBegun: async (one) => void begun.set(one.id, one),
    putPiece: async (id, index, piece) => void pieces.set(`${id} ${index}`, piece),
    piece: async (id, index) => pieces.get(`${id} ${index}`) ?? null,
    removePiece: async (id, index) => void pieces.delete(`${id} ${index}`),
    remove: async (id) => {
      begun.delete(id)
      for (const key of pieces.keys()) if (key.startsWith(`${id} `)) pieces.delete(key)
    },
    list: async () => [...begun.values()]
  }
}
