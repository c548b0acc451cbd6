import { QueryClient, QueryClientProvider } from '@tanstack/react-query'
import { cleanup, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, it, vi } from 'vitest'
import type { Take } from '@shared/contracts/takes'
import { standInForLayers } from '../ui/layers-stand-in'
import { TakeSettings } from '@client/features/takes/take-settings'

standInForLayers()

const id = (n: number): string => `00000000-0000-4000-8000-00000000000${n}`
const take: Take = {
  id: id(1),
  groupId: id(2),
  tuneId: null,
  title: 'Slow walk',
  uploader: { id: id(3), name: 'Inés Baltar' },
  reach: 'my teachers',
  named: [],
  createdAt: '2026-12-01T10:00:00.000Z',
  state: 'ready',
  stage: null,
  progress: 1,
  fault: null,
  durationSec: 60,
  sampleRate: 44_100,
  channels: 1,
  loudnessLufs: -18,
  gainDb: 0,
  tuningCents: null,
  commentCount: 0,
  openCount: 0,
  overTakeId: null,
  abilities: ['take:read', 'take:hear', 'take:edit', 'take:delete']
}
const person = (n: number, name: string) => ({
  id: id(n),
  name,
  role: 'member',
  isMinor: false,
  hasGuardianConsent: false,
  joinedAt: take.createdAt
})

/** A server of two answers; every request is kept. */
const serve = () => {
  const sent: { method: string; path: string; body: unknown }[] = []
  vi.stubGlobal('fetch', async (path: string, init: RequestInit) => {
    sent.push({ method: init.method ?? 'GET', path, body: init.body ? JSON.parse(String(init.body)) : null })
    const answer = path.endsWith('/people')
      ? { items: [person(3, 'Inés Baltar'), person(4, 'Pell Sandvik')] }
      : init.method === 'DELETE'
        ? {}
        : take
    return new Response(JSON.stringify(answer), { status: 200 })
  })
  return sent
}
const show = (given: Take = take) => {
  const onClose = vi.fn()
  const onRemoved = vi.fn()
  render(
    <QueryClientProvider client={new QueryClient()}>
      <TakeSettings take={given} onClose={onClose} onRemoved={onRemoved} />
    </QueryClientProvider>
  )
  return { onClose, onRemoved, user: userEvent.setup() }
}

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

describe('TakeSettings', () => {
  it('shares a take with just the people named', async () => {
    const sent = serve()
    const { user, onClose } = show()
    await user.click(screen.getByRole('radio', { name: /People I name/ }))
    await user.click(await screen.findByRole('checkbox', { name: 'Pell Sandvik' }))
    expect(screen.queryByRole('checkbox', { name: 'Inés Baltar' })).toBeNull()
    await user.click(screen.getByRole('button', { name: 'Save' }))
    await waitFor(() => expect(onClose).toHaveBeenCalled())
    const change = sent.find(({ method }) => method === 'PATCH')
    expect(change?.body).toEqual({ title: 'Slow walk', reach: 'named', namedIds: [id(4)] })
  })

  it('deletes only after a second yes', async () => {
    const sent = serve()
    const { user, onRemoved } = show()
    await user.click(screen.getByRole('button', { name: 'Delete this take' }))
    expect(sent.filter(({ method }) => method === 'DELETE')).toHaveLength(0)
    await user.click(screen.getByRole('button', { name: 'Delete it for good' }))
    await waitFor(() => expect(onRemoved).toHaveBeenCalled())
  })

  it('offers a listener the download and nothing to change', () => {
    serve()
    show({ ...take, abilities: ['take:read', 'take:hear'] })
    expect(screen.getByRole('link', { name: /Download/ }).getAttribute('href')).toBe(`/api/takes/${take.id}/original`)
    expect(screen.queryByRole('button', { name: 'Save' })).toBeNull()
    expect(screen.queryByRole('button', { name: /Delete/ })).toBeNull()
  })
})
