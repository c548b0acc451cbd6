import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createChangeQueue, type ChangeStore } from '@client/features/comments/change-queue'
import type { PendingChange } from '@client/features/comments/changes'
import { ApiProblem } from '@client/lib/api'

const problem = (code: ApiProblem['code']) => new ApiProblem(code, `because of ${code}`, null)

const change = (id: string, over: Partial<PendingChange> = {}): PendingChange => ({
  id,
  at: '2026-12-01T10:00:00.000Z',
  change: {
    kind: 'create',
    commentId: `comment ${id}`,
    commentKind: 'question',
    text: 'Late?',
    span: { startSec: 1, endSec: 2 }
  },
  ...over
})

/** What a browser keeps between two visits. */
const keptStore = () => {
  const kept = new Map<string, PendingChange>()
  const store: ChangeStore = {
    list: async () => [...kept.values()],
    put: async (one) => void kept.set(one.id, one),
    remove: async (id) => void kept.delete(id)
  }
  return { kept, store }
}

const setup = (answers: (string | null)[] = [], shared = keptStore()) => {
  const sent: string[] = []
  const queue = createChangeQueue({
    store: shared.store,
    send: async ({ id }) => {
      sent.push(id)
      const code = answers.shift()
      if (code) throw problem(code as ApiProblem['code'])
    },
    now: Date.now,
    wait: (ms) => new Promise((done) => setTimeout(done, ms))
  })
  return { queue, sent, ...shared }
}

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

const settle = (ms = 0) => vi.advanceTimersByTimeAsync(ms)

describe('createChangeQueue', () => {
  it('sends changes one after the other, in their order, and keeps none that arrived', async () => {
    const { queue, sent, kept } = setup()
    queue.push(change('1'))
    queue.push(change('2'))
    expect(queue.pending()).toHaveLength(2)
    await settle()
    expect(sent).toEqual(['1', '2'])
    expect(queue.pending()).toEqual([])
    expect(kept.size).toBe(0)
  })

  it('keeps what cannot be sent, and sends it when the server is back', async () => {
    const { queue, sent, kept } = setup(['offline', 'offline', 'unavailable', null])
    queue.push(change('1'))
    await settle()
    expect(queue.pending()).toHaveLength(1)
    expect([...kept.keys()]).toEqual(['1'])
    await settle(20_000)
    expect(sent).toEqual(['1', '1', '1', '1'])
    expect(kept.size).toBe(0)
  })

  it('finds after a reload what an earlier visit could not send, and sends it once', async () => {
    const shared = keptStore()
    const before = setup(['offline'], shared)
    before.queue.push(change('1'))
    await settle()
    const after = setup([], shared)
    await Promise.all([after.queue.wake(), after.queue.wake()])
    await settle()
    expect(after.sent).toEqual(['1'])
    expect(shared.kept.size).toBe(0)
  })

  it('keeps a refused change with its reason, goes on with the others and tries again when asked', async () => {
    const { queue, sent, kept } = setup(['forbidden', null, null])
    queue.push(change('1'))
    queue.push(change('2'))
    await settle()
    expect(sent).toEqual(['1', '2'])
    expect(queue.pending().map(({ id, refused }) => [id, refused])).toEqual([['1', 'because of forbidden']])
    expect(kept.get('1')?.refused).toBe('because of forbidden')
    queue.tryAgain('1')
    await settle()
    expect(queue.pending()).toEqual([])
  })

  it('holds a deletion back while it can be taken back', async () => {
    const { queue, sent } = setup()
    const remove = { kind: 'remove', commentId: 'c' } as const
    queue.push(change('1', { change: remove, notBeforeMs: Date.now() + 10_000 }))
    queue.push(change('2', { change: remove, notBeforeMs: Date.now() + 10_000 }))
    queue.push(change('3'))
    await settle(9000)
    expect(sent).toEqual(['3'])
    expect(queue.takeBack('1')).toBe(true)
    await settle(2000)
    expect(sent).toEqual(['3', '2'])
    expect(queue.takeBack('2')).toBe(false)
  })

  it('counts a deletion of what is gone already as done', async () => {
    const { queue } = setup(['not-found'])
    queue.push(change('1', { change: { kind: 'remove', commentId: 'c' } }))
    await settle()
    expect(queue.pending()).toEqual([])
  })

  it('loses nothing when the sign-in has ended: it waits for the next visit', async () => {
    const { queue, sent, kept } = setup(['sign-in-needed', null])
    queue.push(change('1'))
    await settle(60_000)
    expect(sent).toEqual(['1'])
    expect(kept.size).toBe(1)
    await queue.wake()
    await settle()
    expect(sent).toEqual(['1', '1'])
    expect(kept.size).toBe(0)
  })
})
