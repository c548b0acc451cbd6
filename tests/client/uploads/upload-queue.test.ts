import { describe, expect, it } from 'vitest'
import { freshId } from '@client/lib/ids'
import { ApiProblem, offlineProblem } from '@client/lib/api'
import { createUploadQueue } from '@client/features/uploads/upload-queue'
import type { UploadJob } from '@client/features/uploads/upload-types'
import type { Take } from '@shared/contracts/takes'
import { limits } from '@shared/limits'

const job = (name: string, over: Partial<UploadJob> = {}): UploadJob => ({
  id: freshId(),
  ownerId: 'me',
  file: new File(['sound'], name),
  details: { groupId: 'g', title: name, reach: 'group' },
  ...over
})
const takeOf = ({ id, details }: UploadJob): Take => ({ id, title: details.title }) as Take

interface Sending {
  job: UploadJob
  onSent: (bytes: number) => void
  signal: AbortSignal
  arrive: () => void
  fail: (error: unknown) => void
}

/** A server under the test's hand: every send waits until it is told how it went. */
const handServer = () => {
  const sendings: Sending[] = []
  const queue = createUploadQueue({
    send: (sent, onSent, signal) =>
      new Promise<Take>((resolve, reject) => {
        sendings.push({ job: sent, onSent, signal, arrive: () => resolve(takeOf(sent)), fail: reject })
      })
  })
  return { queue, sendings, states: () => queue.list().map(({ state }) => state) }
}
const settle = () => new Promise<void>((resolve) => setTimeout(resolve, 0))
const at = <T>(items: readonly T[], index: number): T => {
  const item = items[index]
  if (item === undefined) throw new Error(`There is no item ${index}.`)
  return item
}

describe('createUploadQueue', () => {
  it('sends two at a time, in order, and the next when one has arrived', async () => {
    const { queue, sendings, states } = handServer()
    queue.add([job('a'), job('b'), job('c')])
    expect(states()).toEqual(['sending', 'sending', 'waiting'])
    at(sendings, 1).arrive()
    await settle()
    expect(states()).toEqual(['sending', 'sent', 'sending'])
    expect(sendings.map(({ job: sent }) => sent.file.name)).toEqual(['a', 'b', 'c'])
  })

  it('tells how much has gone out', () => {
    const { queue, sendings } = handServer()
    queue.add([job('a')])
    at(sendings, 0).onSent(3)
    expect(queue.list()[0]).toMatchObject({ sentBytes: 3, bytes: 5 })
  })

  it('keeps a refusal in the words of the server, and does not offer to send the same bytes again', async () => {
    const { queue, sendings } = handServer()
    queue.add([job('a')])
    at(sendings, 0).fail(new ApiProblem('not-audio', 'This is a list of other files, not a recording.', null))
    await settle()
    expect(queue.list()[0]).toMatchObject({
      state: 'failed',
      fault: 'This is a list of other files, not a recording.',
      canRetry: false
    })
  })

  it('tries again with the same id, so that one take comes of it', async () => {
    const { queue, sendings, states } = handServer()
    const sent = job('a')
    queue.add([sent])
    at(sendings, 0).fail(new ApiProblem('internal', 'Something went wrong on our side', null))
    await settle()
    expect(queue.list()[0]).toMatchObject({ state: 'failed', canRetry: true })
    queue.retry(sent.id)
    at(sendings, 1).arrive()
    await settle()
    expect(states()).toEqual(['sent'])
    expect(sendings.map(({ job: { id } }) => id)).toEqual([sent.id, sent.id])
  })

  it('waits while there is no connection, and goes on when there is one', async () => {
    const { queue, sendings, states } = handServer()
    queue.add([job('a')])
    at(sendings, 0).fail(offlineProblem())
    await settle()
    expect(states()).toEqual(['offline'])
    expect(queue.isBusy()).toBe(true)
    queue.wake()
    expect(states()).toEqual(['sending'])
    at(sendings, 1).arrive()
    await settle()
    expect(queue.isBusy()).toBe(false)
  })

  it('stops a sending that is called off, forgets it, and starts the next', async () => {
    const { queue, sendings } = handServer()
    const jobs = [job('a'), job('b'), job('c')]
    queue.add(jobs)
    queue.cancel(at(jobs, 0).id)
    at(sendings, 0).fail(new DOMException('called off', 'AbortError'))
    await settle()
    expect(at(sendings, 0).signal.aborted).toBe(true)
    expect(queue.list().map(({ fileName, state }) => [fileName, state])).toEqual([
      ['b', 'sending'],
      ['c', 'sending']
    ])
  })

  it('sends nothing that is empty or too large, and says which it is', () => {
    const { queue, sendings } = handServer()
    const large = new File([], 'two hours.wav')
    Object.defineProperty(large, 'size', { value: limits.uploadBytes + 1 })
    queue.add([job('empty', { file: new File([], 'empty.wav') }), job('large', { file: large })])
    expect(sendings).toHaveLength(0)
    expect(queue.list().map(({ fault }) => fault)).toEqual([
      'This file is empty.',
      expect.stringContaining('1 GB is the most that may be sent')
    ])
    expect(queue.isBusy()).toBe(false)
  })

  it('takes a job of a known id only once', () => {
    const { queue, sendings } = handServer()
    const sent = job('a')
    queue.add([sent, sent])
    queue.add([sent])
    expect(sendings).toHaveLength(1)
  })
})
