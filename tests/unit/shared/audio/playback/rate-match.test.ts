import { describe, expect, it } from 'vitest'
import { createRateMatch } from '@shared/audio/playback/rate-match'
import { createPageStore } from '@shared/audio/playback/page-store'
import { createStretcher } from '@shared/audio/stretch/stretcher'
import { marginSec } from '@client/transport/engine/piece-window'

describe('matching rates', () => {
  it('gives a tone of 48000 at 44100 without a seam, in its place and at its level', () => {
    const hz = 220
    let frame = 0
    const match = createRateMatch(
      ([out], frames) => {
        for (let n = 0; n < frames; n += 1) if (out) out[n] = Math.sin((2 * Math.PI * hz * frame++) / 48_000)
      },
      1,
      48_000 / 44_100
    )
    const sound = new Float32Array(44_100)
    const block = [new Float32Array(128)]
    for (let done = 0; done + 128 <= sound.length; done += 128) {
      match(block, 128)
      sound.set(block[0] ?? [], done)
    }
    for (let n = 500; n < 44_000; n += 1)
      expect(Math.abs((sound[n] ?? 0) - Math.sin((2 * Math.PI * hz * n) / 44_100))).toBeLessThan(1e-4)
  })
})

describe('the pieces held around a place', () => {
  it('cover what the stretcher looks at', () => {
    const { reach } = createStretcher(createPageStore({ channels: 1, sampleRate: 48_000, frames: 0 }))
    expect(Math.max(reach.before, reach.after) / 48_000).toBeLessThan(marginSec)
  })
})
