import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Begun, RecordingStore } from '@client/features/recorder/piece-store'
import { startRecording } from '@client/features/recorder/recording'
import { liveScopes } from '@client/lib/scope'
import { textOf } from './text-of'

/** MediaRecorder under the test's hand: `give` hands over a piece. */
class FakeRecorder extends EventTarget {
  static last: FakeRecorder
  static isTypeSupported = (type: string) => type.startsWith('audio/webm')
  state = 'inactive'
  mimeType: string
  constructor(_stream: unknown, options: { mimeType?: string }) {
    super()
    this.mimeType = options.mimeType ?? ''
    FakeRecorder.last = this
  }
  start() {
    this.state = 'recording'
  }
  pause() {
    this.state = 'paused'
  }
  resume() {
    this.state = 'recording'
  }
  requestData() {}
  stop() {
    this.state = 'inactive'
    this.give('last')
    this.dispatchEvent(new Event('stop'))
  }
  give(text: string) {
    this.dispatchEvent(Object.assign(new Event('dataavailable'), { data: new Blob(text ? [text] : []) }))
  }
}

const memoryStore = () => {
  const begun = new Map<string, Begun>()
  const pieces = new Map<number, Blob>()
  const store: RecordingStore = {
    putBegun: async (one) => void begun.set(one.id, one),
    putPiece: async (_id, index, piece) => void pieces.set(index, piece),
    piece: async (_id, index) => pieces.get(index) ?? null,
    removePiece: async (_id, index) => void pieces.delete(index),
    remove: async (id) => {
      begun.delete(id)
      pieces.clear()
    },
    list: async () => [...begun.values()]
  }
  return { store, begun, pieces }
}

const track = new EventTarget()
const stream = { getAudioTracks: () => [track] } as unknown as MediaStream
let nowMs = 0
const begin = (owner: { ownerId: string; groupId: string } | null = null) => {
  const memory = memoryStore()
  const sent: string[] = []
  const recording = startRecording({
    stream,
    channels: 2,
    owner,
    store: memory.store,
    now: () => nowMs,
    server: {
      start: () => Promise.resolve({ nextPiece: 0 }),
      send: async (_id, index, piece) => {
        sent.push(await textOf(piece))
        return { nextPiece: index + 1 }
      }
    }
  })
  return { recording, sent, ...memory }
}

describe('startRecording', () => {
  beforeEach(() => {
    nowMs = 0
    vi.stubGlobal('MediaRecorder', FakeRecorder)
  })
  afterEach(() => vi.unstubAllGlobals())

  it('sends pieces while it records, and has all of them when it has stopped', async () => {
    const { recording, sent, pieces } = begin({ ownerId: 'me', groupId: 'g' })
    FakeRecorder.last.give('one')
    FakeRecorder.last.give('two')
    await recording.stop()
    await recording.sender?.drained()
    expect(sent).toEqual(['one', 'two', 'last'])
    expect(recording.pieces()).toBe(3)
    expect(pieces.size).toBe(0)
    expect(await textOf(recording.file())).toBe('onetwolast')
    await recording.forget()
  })

  it('keeps every piece in the browser before anybody has signed in', async () => {
    const { recording, begun, pieces } = begin()
    FakeRecorder.last.give('one')
    nowMs = 2500
    FakeRecorder.last.give('two')
    await recording.stop()
    expect(recording.sender).toBeNull()
    expect(pieces.size).toBe(3)
    expect(begun.get(recording.id)).toMatchObject({ ownerId: null, groupId: null, pieces: 3, lengthSec: 2.5 })
    await recording.forget()
    expect(begun.size).toBe(0)
  })

  it('does not count what the recorder hands over empty', async () => {
    const { recording } = begin()
    FakeRecorder.last.give('')
    FakeRecorder.last.give('one')
    await recording.stop()
    expect(recording.pieces()).toBe(2)
    await recording.forget()
  })

  it('leaves pauses out of its length', () => {
    const { recording } = begin()
    nowMs = 3000
    recording.pause()
    nowMs = 60_000
    expect(recording.lengthSec()).toBe(3)
    recording.resume()
    nowMs = 61_000
    expect(recording.lengthSec()).toBe(4)
    recording.dispose()
  })

  it('says so when the input goes away', async () => {
    const { recording } = begin()
    track.dispatchEvent(new Event('ended'))
    expect(recording.view().fault).toMatch(/input went away/)
    await recording.stop()
    await recording.forget()
  })

  it('stays findable, without a listener left behind, when the page is left in the middle', async () => {
    const before = liveScopes()
    const { recording, begun } = begin()
    FakeRecorder.last.give('one')
    recording.dispose()
    await vi.waitFor(() => expect(liveScopes()).toBe(before))
    expect(begun.get(recording.id)).toMatchObject({ pieces: 2 })
  })
})
