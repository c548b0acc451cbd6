import { describe, expect, it } from 'vitest'
import { createPageStore } from '@shared/audio/playback/page-store'

const page = (firstFrame: number, length: number) => ({
  firstFrame,
  channels: [Float32Array.from({ length }, (_, n) => firstFrame + n + 1)]
})
const make = () => {
  const store = createPageStore({ channels: 1, sampleRate: 100, frames: 300 })
  store.put(1, page(100, 100))
  store.put(0, page(0, 100))
  return store
}
const read = (store: ReturnType<typeof make>, from: number, length: number) => {
  const into = [new Float32Array(length).fill(-1)]
  return store.read(from, into) ? [...(into[0] ?? [])] : null
}

describe('a page store', () => {
  it('joins pages where they meet', () => {
    expect(read(make(), 98, 4)).toEqual([99, 100, 101, 102])
  })
  it('gives silence before the take and after it', () => {
    const store = make()
    store.put(2, page(200, 100))
    expect(read(store, -2, 4)).toEqual([0, 0, 1, 2])
    expect(read(store, 298, 4)).toEqual([299, 300, 0, 0])
    expect(read(store, 400, 2)).toEqual([0, 0])
    expect(read(store, -9, 2)).toEqual([0, 0])
  })
  it('gives nothing when a frame is missing', () => {
    const store = make()
    expect(read(store, 199, 2)).toBeNull()
    expect(store.has(150, 200)).toBe(true)
    expect(store.has(150, 201)).toBe(false)
    store.drop(0)
    expect(store.has(50, 150)).toBe(false)
    expect(store.has(100, 200)).toBe(true)
  })
})
