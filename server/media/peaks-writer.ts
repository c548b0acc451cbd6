// Writes a peak file while the recording is being read: the finest level goes straight to disk, coarser ones wait.
import { open } from 'node:fs/promises'
import { createPeakFolder } from '@shared/audio/peak-folder.ts'
import { encodePeakHeader, peakHeaderBytes, peakLayout, type PeakHeader } from '@shared/audio/peaks.ts'

const blockBytes = 1 << 18

/** Bytes that grow block by block; six hours of stereo leave some 11 MB of them in the coarser levels. */
const createShelf = () => {
  let blocks: Buffer[] = []
  let last = Buffer.alloc(blockBytes)
  let used = 0
  const seal = () => {
    if (used > 0) blocks.push(last.subarray(0, used))
    last = Buffer.alloc(blockBytes)
    used = 0
  }
  return {
    put(bucket: Int16Array): void {
      if (used + bucket.length * 2 > blockBytes) seal()
      for (const value of bucket) used = last.writeInt16LE(value, used)
    },
    isFull: () => blocks.length > 0,
    take(): Buffer[] {
      seal()
      const taken = blocks
      blocks = []
      return taken
    }
  }
}

export const createPeaksWriter = async (path: string, sampleRate: number, channels: number) => {
  const file = await open(path, 'wx')
  const shelves = peakLayout(sampleRate, channels, 0).levels.map(createShelf)
  const folder = createPeakFolder(channels, (level, bucket) => shelves[level]?.put(bucket))
  let end = peakHeaderBytes

  const writeAt = async (bytes: Uint8Array, position: number): Promise<void> => {
    for (let done = 0; done < bytes.length;) {
      // A disk that fills up may take a part before it refuses the rest.
      done += (await file.write(bytes, done, bytes.length - done, position + done)).bytesWritten
    }
  }

  const append = async (blocks: Buffer[]): Promise<void> => {
    for (const block of blocks) {
      await writeAt(block, end)
      end += block.length
    }
  }

  return {
    async push(samples: Float32Array): Promise<void> {
      folder.push(samples)
      const finest = shelves[0]
      if (finest?.isFull()) await append(finest.take())
    },
    frames: folder.frames,
    loudest: folder.loudest,
    async finish(): Promise<PeakHeader> {
      folder.finish()
      for (const shelf of shelves) await append(shelf.take())
      const header = peakLayout(sampleRate, channels, folder.frames())
      await writeAt(encodePeakHeader(header), 0)
      return header
    },
    close: () => file.close()
  }
}
