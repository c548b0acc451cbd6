import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { ApiProblem, offlineProblem } from '@client/lib/api'
import { createDocumentQueue, type DocumentState, type RefusedEdit } from '@client/lib/document-queue'
import type { DocumentKind } from '@shared/documents/document'
import { ok } from '@shared/result'

/** A list that edits append to: applying one twice would show. */
const kind: DocumentKind<string[], string> = {
  name: 'list',
  body: z.array(z.string()),
  operation: z.string(),
  empty: [],
  apply: (body, op) => ok([...body, op]),
  invert: () => [],
  parts: (_, op) => [op]
}

const tick = () => new Promise<void>((done) => setTimeout(done, 0))

const open = () => {
  const server = { revision: 0, body: [] as string[] }
  const kept = new Set<string>()
  const refused: RefusedEdit<string>[] = []
  const gates: (() => void)[] = []
  let answer: 'ok' | 'offline' | 'conflict' = 'ok'
  let isGated = false
  const state = (): DocumentState<string[]> => ({ id: 'd', ...server, canUndo: false, canRedo: false })
  const queue = createDocumentQueue<string[], string>({
    kind,
    send: async ({ operations, baseRevision }) => {
      if (answer === 'offline') throw offlineProblem()
      if (answer === 'conflict') {
        const body = { type: '/problems/conflict', title: 'Conflict', status: 409, current: state() }
        throw new ApiProblem('conflict', 'Somebody changed the same place first', body)
      }
      expect(baseRevision).toBe(server.revision)
      server.revision += 1
      server.body = [...server.body, ...operations]
      const result = state()
      if (isGated) await new Promise<void>((done) => gates.push(done))
      return result
    },
    keep: async (edit) => void kept.add(edit.id),
    forget: async (id) => void kept.delete(id),
    onChange: () => undefined,
    onState: () => undefined,
    onRefused: (one) => refused.push(one),
    wait: tick
  })
  queue.open()
  queue.receive(state())
  return {
    queue,
    server,
    kept,
    refused,
    state,
    gate: (on: boolean) => (isGated = on),
    release: () => gates.splice(0).forEach((done) => done()),
    answerWith: (next: typeof answer) => (answer = next)
  }
}

describe('createDocumentQueue', () => {
  it('shows edits at once and sends them one after the other', async () => {
    const { queue, server, kept } = open()
    queue.push({ id: '1', operations: ['a'] })
    queue.push({ id: '2', operations: ['b'] })
    expect(queue.body()).toEqual(['a', 'b'])
    expect(kept.size).toBe(2)
    await tick()
    await tick()
    expect(server.body).toEqual(['a', 'b'])
    expect(kept.size).toBe(0)
  })

  it('never shows an edit twice when the group is told of it before the answer is in', async () => {
    const { queue, state, gate, release } = open()
    gate(true)
    queue.push({ id: '1', operations: ['a'] })
    await tick()
    queue.receive(state())
    expect(queue.body()).toEqual(['a'])
    release()
    await tick()
    expect(queue.body()).toEqual(['a'])
  })

  it('hears what others did while its own edit was under way', async () => {
    const { queue, server, state, gate, release } = open()
    gate(true)
    queue.push({ id: '1', operations: ['a'] })
    await tick()
    server.revision += 1
    server.body = [...server.body, 'theirs']
    queue.receive(state())
    release()
    await tick()
    expect(queue.body()).toEqual(['a', 'theirs'])
  })

  it('keeps what cannot be sent and sends it when the line is back', async () => {
    const { queue, server, kept, answerWith } = open()
    answerWith('offline')
    queue.push({ id: '1', operations: ['a'] })
    await tick()
    expect(kept.has('1')).toBe(true)
    expect(queue.body()).toEqual(['a'])
    answerWith('ok')
    for (let i = 0; i < 5; i += 1) await tick()
    expect(server.body).toEqual(['a'])
  })

  it('drops an edit that conflicts and says so with what is there now', async () => {
    const { queue, refused, server, answerWith } = open()
    server.revision = 3
    server.body = ['theirs']
    answerWith('conflict')
    queue.push({ id: '1', operations: ['mine'] })
    await tick()
    await tick()
    expect(refused.map(({ isConflict }) => isConflict)).toEqual([true])
    expect(queue.body()).toEqual(['theirs'])
  })

  it('takes back an edit that has not set out, and not one that has', async () => {
    const { queue, server, gate, release } = open()
    gate(true)
    queue.push({ id: '1', operations: ['a'] })
    await tick()
    expect(queue.takeBack()).toBe(false)
    queue.push({ id: '2', operations: ['b'] })
    expect(queue.takeBack()).toBe(true)
    release()
    await queue.landed()
    await tick()
    expect(server.body).toEqual(['a'])
    expect(queue.unsent()).toBe(0)
  })

  it('goes on after it was closed and opened again', async () => {
    const { queue, server } = open()
    queue.close()
    queue.push({ id: '1', operations: ['a'] })
    await tick()
    expect(server.body).toEqual([])
    queue.open()
    await tick()
    await tick()
    expect(server.body).toEqual(['a'])
  })
})
