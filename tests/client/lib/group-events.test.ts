import { QueryClient } from '@tanstack/react-query'
import { beforeEach, describe, expect, it, vi } from 'vitest'

const asked: string[] = []
const waiting: (() => void)[] = []
const socket = { connected: true, on: vi.fn(), off: vi.fn(), connect: vi.fn() }

vi.mock('@client/lib/socket', () => ({
  roomSocket: () => socket,
  ask: (event: string) =>
    new Promise((answer) => {
      asked.push(event)
      waiting.push(() => answer({ lastSeq: 0 }))
    })
}))

const { followGroup } = await import('@client/lib/group-events')

const groupId = '6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f0002'
const follow = () => followGroup({ client: new QueryClient(), groupId })
const settle = async (): Promise<void> => {
  for (let round = 0; round < 20; round += 1) {
    waiting.shift()?.()
    await Promise.resolve()
  }
}

beforeEach(() => void asked.splice(0))

describe('followGroup', () => {
  it('asks again for everything when this group is closed to the person, and for nothing when another is', async () => {
    const client = new QueryClient()
    const again = vi.spyOn(client, 'invalidateQueries')
    const scope = followGroup({ client, groupId })
    const closed = socket.on.mock.calls.findLast(([name]) => name === 'group:closed')?.[1] as (told: object) => void
    closed({ groupId: 'another' })
    expect(again).not.toHaveBeenCalled()
    closed({ groupId })
    expect(again).toHaveBeenCalledWith()
    await settle()
    scope.dispose()
    await settle()
  })

  it('stays in the group while one page takes over from another', async () => {
    const first = follow()
    await settle()
    first.dispose()
    const second = follow()
    await settle()
    expect(asked).toEqual(['group:follow', 'group:follow'])
    second.dispose()
    await settle()
    expect(asked.at(-1)).toBe('group:unfollow')
  })

  it('leaves only with the last one, and follows again only after the leaving was answered', async () => {
    const one = follow()
    const other = follow()
    await settle()
    one.dispose()
    await settle()
    expect(asked).not.toContain('group:unfollow')
    other.dispose()
    await Promise.resolve()
    await Promise.resolve()
    expect(asked.at(-1)).toBe('group:unfollow')
    const again = follow()
    for (let round = 0; round < 20; round += 1) await Promise.resolve()
    expect(asked.at(-1)).toBe('group:unfollow')
    await settle()
    expect(asked.at(-1)).toBe('group:follow')
    again.dispose()
    await settle()
  })
})
