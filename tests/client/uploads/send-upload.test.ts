import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { ApiProblem } from '@client/lib/api'
import { freshId } from '@client/lib/ids'
import { liveScopes } from '@client/lib/scope'
import { sendUpload } from '@client/features/uploads/send-upload'

/** XMLHttpRequest as far as an upload uses it. */
class FakeXhr extends EventTarget {
  static last: FakeXhr
  upload = new EventTarget()
  status = 0
  responseText = ''
  opened: string[] = []
  body: FormData | null = null
  constructor() {
    super()
    FakeXhr.last = this
  }
  open(...args: string[]) {
    this.opened = args
  }
  send(body: FormData) {
    this.body = body
  }
  abort() {
    this.dispatchEvent(new Event('abort'))
  }
  progress(loaded: number, total: number) {
    this.upload.dispatchEvent(Object.assign(new Event('progress'), { loaded, total }))
  }
  answer(status: number, body: string) {
    Object.assign(this, { status, responseText: body })
    this.dispatchEvent(new Event('load'))
  }
}

const groupId = freshId()
const job = (tuneId?: string) => ({
  id: freshId(),
  ownerId: 'me',
  file: new File(['0123456789'], 'basement.wav'),
  details: { groupId, title: 'Basement', reach: 'my teachers' as const, ...(tuneId ? { tuneId } : {}) }
})
const nothing = () => undefined

describe('sendUpload', () => {
  beforeEach(() => vi.stubGlobal('XMLHttpRequest', FakeXhr))
  afterEach(() => vi.unstubAllGlobals())

  it('sends the fields before the file, under the names of the contract', () => {
    const sent = job(freshId())
    void sendUpload(sent, nothing, new AbortController().signal).catch(nothing)
    expect(FakeXhr.last.opened).toEqual(['POST', `/api/groups/${groupId}/takes`])
    const fields = [...(FakeXhr.last.body?.entries() ?? [])]
    expect(fields.map(([name]) => name)).toEqual(['id', 'title', 'tuneId', 'reach', 'agreed', 'recording'])
    expect(Object.fromEntries(fields)).toMatchObject({
      id: sent.id,
      title: 'Basement',
      reach: 'my teachers',
      agreed: 'yes'
    })
  })

  it('tells bytes of the file, not of the form around it', () => {
    const told: number[] = []
    void sendUpload(job(), (bytes) => told.push(bytes), new AbortController().signal).catch(nothing)
    FakeXhr.last.progress(300, 600)
    FakeXhr.last.progress(600, 600)
    expect(told).toEqual([5, 10])
  })

  it('throws the problem of the answer', async () => {
    const sending = sendUpload(job(), nothing, new AbortController().signal)
    const body = { type: '/problems/not-audio', title: 'No', status: 415, detail: 'This file holds a video.' }
    FakeXhr.last.answer(415, JSON.stringify(body))
    await expect(sending).rejects.toMatchObject({ code: 'not-audio', message: 'This file holds a video.' })
  })

  it('calls a broken connection offline', async () => {
    const sending = sendUpload(job(), nothing, new AbortController().signal)
    FakeXhr.last.dispatchEvent(new Event('error'))
    const error: unknown = await sending.catch((reason: unknown) => reason)
    expect(error).toBeInstanceOf(ApiProblem)
    expect(error).toMatchObject({ code: 'offline' })
  })

  it('stops when it is called off, and leaves no listener', async () => {
    const before = liveScopes()
    const off = new AbortController()
    const sending = sendUpload(job(), nothing, off.signal)
    off.abort()
    await expect(sending).rejects.toMatchObject({ name: 'AbortError' })
    expect(liveScopes()).toBe(before)
  })
})
