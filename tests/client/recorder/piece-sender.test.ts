import { describe, expect, it } from 'vitest'
import { textOf } from './text-of'
import { ApiProblem, offlineProblem } from '@client/lib/api'
import { createPieceSender, type RecordingServer } from '@client/features/recorder/piece-sender'

/** A server that keeps pieces as ours does: in order only, the same one twice harmless. */
const pieceServer = (faults: (() => void)[] = []) => {
  const kept: string[] = []
  let calls = 0
  const stumble = () => faults[calls++]?.()
  const server: RecordingServer = {
    start: () => {
      stumble()
      return Promise.resolve({ nextPiece: kept.length })
    },
    send: async (_id, index, piece) => {
      stumble()
      if (index > kept.length) throw new ApiProblem('conflict', `Piece ${kept.length} comes next.`, null)
      kept[index] = await textOf(piece)
      return { nextPiece: kept.length }
    }
  }
  return { server, kept }
}
const pieceStore = (pieces: string[]) => {
  const held = new Map(pieces.map((text, index) => [index, new Blob([text])]))
  return {
    held,
    piece: (_id: string, index: number) => Promise.resolve(held.get(index) ?? null),
    removePiece: (_id: string, index: number) => {
      held.delete(index)
      return Promise.resolve()
    }
  }
}
const begun = (pieces: number) => ({ id: 'r', groupId: 'g', mime: 'audio/webm', pieces })
const throwing = (error: unknown) => () => {
  throw error
}

describe('createPieceSender', () => {
  it('sends pieces in order as they are made, and lets go of each once the server has it', async () => {
    const { server, kept } = pieceServer()
    const store = pieceStore(['a', 'b', 'c'])
    const sender = createPieceSender({ begun: begun(0), store, server })
    for (const index of [0, 1, 2]) sender.made(index)
    await sender.drained()
    expect(kept).toEqual(['a', 'b', 'c'])
    expect(store.held.size).toBe(0)
    sender.dispose()
  })

  it('keeps what the server has not acknowledged, and sends it when the connection is back', async () => {
    const { server, kept } = pieceServer([() => undefined, () => undefined, throwing(offlineProblem())])
    const store = pieceStore(['a', 'b'])
    const sender = createPieceSender({ begun: begun(2), store, server })
    await new Promise<void>((resolve) => {
      sender.subscribe(() => sender.view().way === 'offline' && resolve())
    })
    expect([...store.held.keys()]).toEqual([1])
    sender.wake()
    await sender.drained()
    expect(kept).toEqual(['a', 'b'])
    expect(sender.view()).toMatchObject({ way: 'open', sent: 2, made: 2 })
    sender.dispose()
  })

  it('goes on where an earlier page stopped', async () => {
    const { server, kept } = pieceServer()
    kept.push('a')
    const store = pieceStore(['', 'b', 'c'])
    store.held.delete(0)
    const sender = createPieceSender({ begun: begun(3), store, server })
    await sender.drained()
    expect(kept).toEqual(['a', 'b', 'c'])
    sender.dispose()
  })

  it('sends a piece only once more when the answer to it was lost', async () => {
    const { server, kept } = pieceServer()
    const store = pieceStore(['a', 'b'])
    let isLost = false
    const lossy: RecordingServer = {
      ...server,
      send: async (...args) => {
        const answer = await server.send(...args)
        if (args[1] === 0 && !isLost) {
          isLost = true
          throw offlineProblem()
        }
        return answer
      }
    }
    const sender = createPieceSender({ begun: begun(2), store, server: lossy })
    await sender.drained()
    expect(kept).toEqual(['a', 'b'])
    sender.dispose()
  })

  it('asks where the server stands when they count differently', async () => {
    const { server, kept } = pieceServer()
    const store = pieceStore(['a', 'b'])
    let starts = 0
    const forgetful: RecordingServer = {
      ...server,
      start: (input) => {
        starts += 1
        return starts === 1 ? Promise.resolve({ nextPiece: 1 }) : server.start(input)
      }
    }
    const sender = createPieceSender({ begun: begun(2), store, server: forgetful })
    await sender.drained()
    expect(kept).toEqual(['a', 'b'])
    sender.dispose()
  })

  it('gives up on a refusal, says it in the words of the server, and keeps the pieces', async () => {
    const { server } = pieceServer([
      () => undefined,
      throwing(new ApiProblem('over-quota', 'There is no room left.', null))
    ])
    const store = pieceStore(['a'])
    const sender = createPieceSender({ begun: begun(1), store, server })
    await expect(sender.drained()).rejects.toThrow('There is no room left.')
    expect(sender.view()).toMatchObject({ way: 'refused', fault: 'There is no room left.' })
    expect(store.held.size).toBe(1)
    sender.dispose()
  })
})
