import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { wantedPieces, type Want } from '@shared/audio/playback/wanted-pieces'

const length = 100
const count = 60
const manifest = {
  totalFrames: length * count,
  pieces: Array.from({ length: count }, (_, n) => ({ firstSample: n * length, frames: length }))
}
const want = (over: Partial<Want> = {}): Want => ({
  placeFrame: 1050,
  loop: null,
  aheadFrames: 500,
  behindFrames: 100,
  marginFrames: 20,
  most: 20,
  ...over
})

describe('wanted pieces', () => {
  it('begin with the one under the playhead, then lie ahead, then behind', () => {
    expect(wantedPieces(manifest, want())).toEqual([10, 11, 12, 13, 14, 15, 9])
  })

  it('hold the one before too when the playhead has just passed into a piece', () => {
    expect(wantedPieces(manifest, want({ placeFrame: 1010 })).slice(0, 2)).toEqual([10, 9])
  })

  it('turn with the loop and keep all of it', () => {
    const loop = { startFrame: 400, endFrame: 1290 }
    expect(wantedPieces(manifest, want({ loop }))).toEqual([10, 11, 12, 13, 3, 4, 5, 6, 7, 8, 9])
  })

  it('leave a loop alone that lies behind', () => {
    expect(wantedPieces(manifest, want({ loop: { startFrame: 0, endFrame: 300 } }))).not.toContain(0)
  })

  it('never are more than allowed, always exist, and start with the place, wherever it is', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -500, max: 7000 }),
        fc.integer({ min: 0, max: 5000 }),
        fc.integer({ min: 1, max: 3000 }),
        (placeFrame, startFrame, size) => {
          const loop = { startFrame, endFrame: Math.min(startFrame + size, manifest.totalFrames) }
          const wanted = wantedPieces(manifest, want({ placeFrame, loop, most: 12 }))
          const held = Math.max(0, Math.min(placeFrame, manifest.totalFrames - 1))
          expect(wanted[0]).toBe(Math.floor(held / length))
          expect(wanted.length).toBeLessThanOrEqual(12)
          expect(new Set(wanted).size).toBe(wanted.length)
          expect(wanted.every((n) => n >= 0 && n < count)).toBe(true)
        }
      ),
      { numRuns: 100 }
    )
  })
})
