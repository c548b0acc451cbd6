import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { liveScopes } from '@client/lib/scope'
import { PieceFault } from '@client/transport/engine/piece-fault'
import { createPieceWindow, type PieceWindow } from '@client/transport/engine/piece-window'
import { retryDelaysMs } from '@client/transport/media-faults'
import type { Page } from '@shared/audio/playback/page-store'

const rate = 48_000
const pieceFrames = 10 * rate
const threeHours = 1080
const manifest = {
  sampleRate: rate,
  channels: 2,
  totalFrames: threeHours * pieceFrames,
  pieces: Array.from({ length: threeHours }, (_, n) => ({
    firstSample: n * pieceFrames,
    frames: pieceFrames,
    decodedFrames: pieceFrames + 30_720,
    bytes: 250_000
  }))
}

let asked: number[]
let put: number[]
let dropped: number[]
let troubles: boolean[]
let faults: string[]
/** What the next loads end in. */
let fault: PieceFault | null
let holdBack: boolean
let waiting: (() => void)[]
let aborted: number[]
let held: PieceWindow
let scopesBefore: number

const settle = async () => {
  for (let n = 0; n < 400; n += 1) await Promise.resolve()
}

beforeEach(() => {
  vi.useFakeTimers()
  ;[asked, put, dropped, troubles, faults, aborted, waiting] = [[], [], [], [], [], [], []]
  fault = null
  holdBack = false
  scopesBefore = liveScopes()
  held = createPieceWindow({
    manifest,
    load: async (index, signal) => {
      asked.push(index)
      signal.addEventListener('abort', () => put.includes(index) || aborted.push(index))
      if (holdBack) await new Promise<void>((resolve) => waiting.push(resolve))
      if (fault) throw fault
      return { firstFrame: index * pieceFrames, channels: [] } as Page
    },
    put: (index) => put.push(index),
    drop: (index) => dropped.push(index),
    onTrouble: (isTrouble) => troubles.push(isTrouble),
    onFault: (message) => faults.push(message)
  })
})
afterEach(() => {
  held.dispose()
  expect(liveScopes()).toBe(scopesBefore)
  vi.useRealTimers()
})

describe('the pieces of a three-hour take', () => {
  it('come in the order of need, the one under the playhead alone at first', async () => {
    holdBack = true
    held.look(500.5 * pieceFrames, null, true)
    await settle()
    expect(asked).toEqual([500])
    holdBack = false
    waiting.forEach((go) => go())
    await settle()
    expect(asked.slice(0, 4)).toEqual([500, 501, 502, 503])
    expect(put).toContain(510)
  })

  it('never take 200 MB, wherever it jumps and however long its loop is', async () => {
    let most = 0
    for (let n = 0; n < 60; n += 1) {
      const place = ((n * 7919) % threeHours) * pieceFrames
      const loop = n % 3 === 0 ? { startFrame: place, endFrame: place + 200 * pieceFrames } : null
      held.look(place, loop, n % 2 === 0)
      most = Math.max(most, held.heldBytes)
      await settle()
      most = Math.max(most, held.heldBytes)
    }
    expect(most).toBeGreaterThan(30e6)
    expect(most).toBeLessThan(200e6)
  })

  it('have more than a minute ahead while it plays', async () => {
    held.look(100 * pieceFrames, null, true)
    await settle()
    expect(held.heldPieces).toEqual(expect.arrayContaining([100, 101, 102, 103, 104, 105, 106]))
  })

  it('keep the beginning of a loop while its end is played', async () => {
    const loop = { startFrame: 10 * pieceFrames, endFrame: 22 * pieceFrames }
    held.look(21 * pieceFrames, loop, true)
    await settle()
    expect(held.heldPieces).toEqual(expect.arrayContaining([10, 11, 12]))
    expect(dropped).toEqual([])
  })

  it('break off what is not wanted any more', async () => {
    holdBack = true
    held.look(100 * pieceFrames, null, true)
    await settle()
    held.look(700 * pieceFrames, null, true)
    await settle()
    expect(aborted).toEqual([100])
    expect(asked.at(-1)).toBe(700)
  })

  it('are asked for again, ever more seldom, and at once when the line is back', async () => {
    fault = new PieceFault('gone', true)
    held.look(5 * pieceFrames, null, true)
    await settle()
    expect(troubles).toEqual([true])
    const before = asked.length
    vi.advanceTimersByTime((retryDelaysMs[0] ?? 0) - 1)
    await settle()
    expect(asked.length).toBe(before)
    vi.advanceTimersByTime(2)
    await settle()
    expect(asked.length).toBe(before + 1)
    fault = null
    window.dispatchEvent(new Event('online'))
    await settle()
    expect(troubles.at(-1)).toBe(false)
    expect(put).toContain(5)
  })

  it('are given up when the server refuses them for good', async () => {
    fault = new PieceFault('not yours', false)
    held.look(5 * pieceFrames, null, true)
    await settle()
    vi.advanceTimersByTime(120_000)
    await settle()
    expect(faults).toEqual(['not yours'])
    expect(asked).toEqual([5])
  })

  it('are sent again to a worklet that has lost them', async () => {
    held.look(5 * pieceFrames, null, true)
    await settle()
    const first = put.length
    held.forget()
    await settle()
    expect(put.length).toBe(2 * first)
  })
})
