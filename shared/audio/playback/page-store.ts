// The pieces of a recording that are here, as one recording that can be read anywhere.
import type { SampleSource } from '../stretch/types.ts'

/** Sound that belongs at `firstFrame`; one array a channel, all of one length. */
export interface Page {
  firstFrame: number
  channels: Float32Array[]
}

export interface PageStore extends SampleSource {
  put(index: number, page: Page): void
  drop(index: number): void
  /** True when every frame of the take from `from` to `to` (half-open) is here. */
  has(from: number, to: number): boolean
}

interface Shape {
  channels: number
  sampleRate: number
  /** Length of the whole take. */
  frames: number
}

export const createPageStore = ({ channels, sampleRate, frames }: Shape): PageStore => {
  const pages = new Map<number, Page>()
  /** The same in order, without gaps in between being known. */
  let sorted: Page[] = []
  const sort = (): void => {
    sorted = [...pages.values()].sort((one, two) => one.firstFrame - two.firstFrame)
  }
  const endOf = (page: Page): number => page.firstFrame + (page.channels[0]?.length ?? 0)

  /** How far the take is here without a gap from `from` on. */
  const reachedFrom = (from: number): number => {
    let reached = from
    for (const page of sorted) if (page.firstFrame <= reached && endOf(page) > reached) reached = endOf(page)
    return reached
  }

  return {
    channels,
    sampleRate,
    frames,
    put: (index, page) => {
      pages.set(index, page)
      sort()
    },
    drop: (index) => {
      pages.delete(index)
      sort()
    },
    has: (from, to) => {
      const [first, end] = [Math.max(0, Math.floor(from)), Math.min(frames, Math.ceil(to))]
      return end <= first || reachedFrom(first) >= end
    },
    read: (from, into) => {
      const length = into[0]?.length ?? 0
      const [first, end] = [Math.max(0, from), Math.min(frames, from + length)]
      if (end > first && reachedFrom(first) < end) return false
      const [before, after] = [Math.min(length, Math.max(0, first - from)), Math.max(0, end - from)]
      for (const samples of into) {
        samples.fill(0, 0, before)
        samples.fill(0, Math.max(before, after))
      }
      for (const page of sorted) {
        const [low, high] = [Math.max(first, page.firstFrame), Math.min(end, endOf(page))]
        if (high <= low) continue
        page.channels.forEach((samples, channel) => {
          into[channel]?.set(samples.subarray(low - page.firstFrame, high - page.firstFrame), low - from)
        })
      }
      return true
    }
  }
}
