// What the window of pieces holds of a take of three hours; the manifest is made up, nothing is decoded.
import { alone, type Figure } from '../report.ts'

const sampleRate = 48_000
const channels = 2
const pieceSec = 10
const hours = 3
const allowedBytes = 200e6

const manifest = () => {
  const frames = pieceSec * sampleRate
  const preroll = sampleRate / 10
  const pieces = Array.from({ length: (hours * 3600) / pieceSec }, (_, i) => ({
    firstSample: i * frames,
    frames,
    decodedFrames: frames + preroll,
    // 192 kbit/s, as much as an encoder of the house ever writes.
    bytes: (pieceSec * 192_000) / 8
  }))
  return { sampleRate, channels, totalFrames: pieces.length * frames, pieces }
}

/** All that has been asked for has come. */
const settle = async (): Promise<void> => {
  for (let turn = 0; turn < 20; turn += 1) await new Promise((resolve) => setImmediate(resolve))
}

export const memoryFigures = async (): Promise<Figure[]> => {
  // The window listens to the browser's line coming back.
  Object.assign(globalThis, { window: new EventTarget() })
  const { createPieceWindow } = await import('@client/transport/engine/piece-window')
  const take = manifest()
  const measure = async (
    walk: (look: (sec: number, loop?: [number, number]) => Promise<void>) => Promise<void>
  ): Promise<number> => {
    let most = 0
    let read = (): number => 0
    const note = (): void => {
      most = Math.max(most, read())
    }
    const pieces = createPieceWindow({
      manifest: take,
      load: async () => {
        note()
        return { firstFrame: 0, frames: 0, channels: [] } as never
      },
      put: note,
      drop: () => undefined,
      onTrouble: () => undefined,
      onFault: (message) => {
        throw new Error(message)
      }
    })
    read = () => pieces.heldBytes
    await walk(async (sec, loop) => {
      const bounds = loop && { startFrame: loop[0] * sampleRate, endFrame: loop[1] * sampleRate }
      pieces.look(sec * sampleRate, bounds ?? null, true)
      note()
      await settle()
      note()
    })
    pieces.dispose()
    return most
  }
  const end = hours * 3600
  const walks: Record<string, number> = {
    'playing it through': await measure(async (look) => {
      for (let sec = 0; sec < end; sec += 5) await look(sec)
    }),
    'seeking 200 times': await measure(async (look) => {
      for (let n = 0; n < 200; n += 1) await look((n * 7919) % end)
    }),
    'looping 20 minutes': await measure(async (look) => {
      for (let n = 0; n < 300; n += 1) await look(3600 + ((n * 13) % 1200), [3600, 4800])
    })
  }
  return Object.entries(walks).map(([name, bytes]) => ({
    ...alone(
      `memory of ${hours} h, ${name}`,
      'MB',
      bytes / 1e6,
      'most that the window of pieces says it holds or works on, stereo at 48 kHz, pieces of 10 s; peer: what is allowed'
    ),
    peer: allowedBytes / 1e6,
    ratio: bytes / allowedBytes
  }))
}
