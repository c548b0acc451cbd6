import { describe, expect, it } from 'vitest'
import { startOverRecording } from '@client/features/over-recording/over-recorder'
import { fileOfTry, type Recorded } from '@client/features/over-recording/try-store'
import { placeOfFrame } from '@shared/practice/over-recording'
import { bytesOf } from '../recorder/text-of'
import { createFakeInput, createMemoryStore, sampleRate, type FakeInput } from './fake-input'

const delaySec = 0.12
/** A knock that is heard at this moment of the player's clock comes in later by the delay. */
const knockAt = (clock: number) => (at: number) => (Math.abs(at - delaySec - clock) < 0.5 / sampleRate ? 0.5 : 0)

const begin = (input: FakeInput, isLooping: boolean, bounds: { startSec: number; endSec: number | null }) => {
  const store = createMemoryStore()
  const recorder = startOverRecording({
    ...input,
    delaySec,
    bounds,
    isLooping,
    ownerId: 'ines',
    takeId: 'take',
    firstNumber: 3,
    store
  })
  return { store, recorder }
}
const framesOf = async (recorded: Recorded, index: number, store: ReturnType<typeof createMemoryStore>) => {
  const one = recorded.tries[index]
  if (!one) throw new Error('there is no such try')
  const file = await fileOfTry(recorded, one, 'try', store)
  if (!file) throw new Error('a piece is missing')
  const bytes = Buffer.from(await bytesOf(file))
  return {
    one,
    file,
    samples: Array.from({ length: (bytes.length - 44) / 3 }, (_, n) => bytes.readIntLE(44 + n * 3, 3) / 2 ** 23)
  }
}

describe('recording over a take', () => {
  it('lays a knock where it was heard, in every time round, at the speed it was played', async () => {
    // Clock 905 to begin with; a second of counting in; four seconds of take at half speed last eight.
    const second = 906 + 8 + 3
    const bounds = { startSec: 20, endSec: 24 }
    const input = createFakeInput({ ...bounds, rate: 0.5, offsetSec: 900, sound: knockAt(second) })
    const { store, recorder } = begin(input, true, bounds)
    input.run(14)
    const recorded = await recorder.stop()
    if (!recorded) throw new Error('nothing was recorded')
    expect(recorded.tries.map(({ number }) => number)).toEqual([3, 4])
    const { one, samples, file } = await framesOf(recorded, 1, store)
    expect([file.name, samples.length]).toEqual(['try.wav', one.cut.frames])
    const loudest = samples.findIndex((value) => value > 0.4)
    // Three seconds into the second time round: one and a half seconds of take.
    expect(placeOfFrame(one.cut, one.cut.fromFrame + loudest, sampleRate)).toBeCloseTo(21.5, 2)
    expect(one.cut.rate).toBeCloseTo(0.5, 6)
  })

  it('keeps every second as it goes, with the tries so far, as a browser that is closed would find it', async () => {
    const bounds = { startSec: 5, endSec: null }
    const input = createFakeInput({ ...bounds, rate: 1, offsetSec: 0, sound: () => 0.25 })
    const { store } = begin(input, false, bounds)
    input.run(6.5)
    await new Promise((done) => setTimeout(done, 0))
    const [left] = store.begun.values()
    expect([left?.pieces, left?.tries.length, store.pieces.size]).toEqual([6, 1, 6])
    const { samples } = await framesOf(left as Recorded, 0, store)
    expect(samples.every((value) => Math.abs(value - 0.25) < 1e-6)).toBe(true)
  })

  it('ends by itself after the passage when it goes once', async () => {
    const bounds = { startSec: 2, endSec: 4 }
    const input = createFakeInput({ startSec: 2, endSec: null, rate: 1, offsetSec: 3, sound: () => 0 })
    const { recorder } = begin(input, false, bounds)
    input.run(6)
    expect(recorder.view().state).toBe('stopping')
    const recorded = await recorder.stop()
    expect(recorded?.tries).toHaveLength(1)
    const { frames } = recorded?.tries[0]?.cut ?? { frames: 0 }
    // Half a second before, two seconds, a second after.
    expect(frames / sampleRate).toBeCloseTo(3.5, 1)
  })

  it('leaves nothing of what is stopped while it counts in', async () => {
    const bounds = { startSec: 2, endSec: null }
    const input = createFakeInput({ ...bounds, rate: 1, offsetSec: 0, sound: () => 0 })
    const { store, recorder } = begin(input, false, bounds)
    input.run(1.5)
    expect(await recorder.stop()).toBeNull()
    expect([store.begun.size, store.pieces.size]).toEqual([0, 0])
  })
})
