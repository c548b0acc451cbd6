// A decoded recording in a file: any length is read like one in memory, and only a few pages of it are held.
import { closeSync, fstatSync, openSync, readSync } from 'node:fs'
import type { SampleSource } from '@shared/audio/stretch/types.ts'
import type { Sound } from './commands.ts'
import { tame } from './frames.ts'

const pageFrames = 1 << 15
/** Half a minute or more at every common rate: wider than anything that renders looks around. */
const pagesHeld = 64

export type SoundFile = SampleSource & { close: () => void }

/** Opens interleaved 32-bit floats at `path`. Reading is synchronous, as renderers need it. */
export const openSoundFile = (path: string, { sampleRate, channels }: Sound): SoundFile => {
  const file = openSync(path, 'r')
  const frames = Math.floor(fstatSync(file).size / (4 * channels))
  const pages = new Map<number, Float32Array[]>()

  const load = (index: number): Float32Array[] => {
    const count = Math.min(pageFrames, frames - index * pageFrames)
    const mixed = new Float32Array(count * channels)
    const bytes = new Uint8Array(mixed.buffer)
    let got = 0
    while (got < bytes.length) {
      const more = readSync(file, bytes, got, bytes.length - got, index * pageFrames * channels * 4 + got)
      if (more === 0) throw new Error('A decoded recording became shorter')
      got += more
    }
    tame(mixed)
    return Array.from({ length: channels }, (_, c) =>
      Float32Array.from({ length: count }, (_x, i) => mixed[i * channels + c] ?? 0)
    )
  }
  const page = (index: number): Float32Array[] => {
    const held = pages.get(index) ?? load(index)
    // Put last again: the first in a map is the one not needed for longest.
    pages.delete(index)
    pages.set(index, held)
    if (pages.size > pagesHeld) pages.delete(pages.keys().next().value ?? -1)
    return held
  }

  return {
    channels,
    sampleRate,
    frames,
    read: (from, into) => {
      const length = into[0]?.length ?? 0
      const first = Math.max(0, from)
      const last = Math.min(frames, from + length)
      for (const target of into) {
        target.fill(0, 0, Math.min(length, first - from))
        target.fill(0, Math.max(0, last - from))
      }
      for (let at = first; at < last;) {
        const index = Math.floor(at / pageFrames)
        const start = index * pageFrames
        const end = Math.min(last, start + pageFrames)
        const held = page(index)
        for (let c = 0; c < channels; c++) into[c]?.set(held[c]?.subarray(at - start, end - start) ?? [], at - from)
        at = end
      }
      return true
    },
    close: () => closeSync(file)
  }
}
