// Writes WAV: plain PCM, 16 or 24 bit, which every program reads.
import { open } from 'node:fs/promises'
import { storageError } from './faults.ts'

export type WavFormat = { sampleRate: number; channels: number; depth: 16 | 24 }

const headBytes = 44
/** Sizes in a WAV's head are 32 bits wide. */
const mostBytes = 0xffffffff - headBytes

/** Whether so many frames fit into one WAV. */
export const fitsWav = (frames: number, { channels, depth }: WavFormat): boolean =>
  (frames * channels * depth) / 8 <= mostBytes

const head = ({ sampleRate, channels, depth }: WavFormat, dataBytes: number): Buffer => {
  const bytes = Buffer.alloc(headBytes)
  const frameBytes = (channels * depth) / 8
  bytes.write('RIFF', 0)
  // A chunk of odd length is followed by a byte that belongs to no chunk.
  bytes.writeUInt32LE(headBytes - 8 + dataBytes + (dataBytes % 2), 4)
  bytes.write('WAVEfmt ', 8)
  bytes.writeUInt32LE(16, 16)
  bytes.writeUInt16LE(1, 20)
  bytes.writeUInt16LE(channels, 22)
  bytes.writeUInt32LE(sampleRate, 24)
  bytes.writeUInt32LE(sampleRate * frameBytes, 28)
  bytes.writeUInt16LE(frameBytes, 32)
  bytes.writeUInt16LE(depth, 34)
  bytes.write('data', 36)
  bytes.writeUInt32LE(dataBytes, 40)
  return bytes
}

/** Half goes to the even neighbour, as decoders round that give whole numbers themselves. */
const round = (value: number): number => {
  const up = Math.round(value)
  return up - value === 0.5 && up % 2 !== 0 ? up - 1 : up
}

/** Floats to whole numbers: what was read from a file of this depth comes out as it was; the rest is kept in range. */
const quantise = (samples: Float32Array, depth: 16 | 24): Buffer => {
  const scale = 2 ** (depth - 1)
  const width = depth / 8
  const bytes = Buffer.alloc(samples.length * width)
  for (let i = 0; i < samples.length; i++) {
    const value = Math.max(-scale, Math.min(scale - 1, round((samples[i] ?? 0) * scale)))
    bytes.writeIntLE(value, i * width, width)
  }
  return bytes
}

/** Opens a new file at `path`. Its head is right once it is closed. */
export const createWavWriter = async (path: string, format: WavFormat) => {
  const file = await open(path, 'w').catch((error: unknown) => Promise.reject(storageError(error)))
  let dataBytes = 0
  await file.write(head(format, 0))
  return {
    /** Interleaved samples, whole frames. */
    write: async (samples: Float32Array): Promise<void> => {
      const bytes = quantise(samples, format.depth)
      await file.appendFile(bytes).catch((error: unknown) => Promise.reject(storageError(error)))
      dataBytes += bytes.length
    },
    close: async (): Promise<void> => {
      try {
        if (dataBytes % 2 === 1) await file.appendFile(Buffer.alloc(1))
        await file.write(head(format, dataBytes), 0, headBytes, 0)
      } finally {
        await file.close()
      }
    }
  }
}
