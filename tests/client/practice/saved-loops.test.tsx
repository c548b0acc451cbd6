import { cleanup, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, it, vi } from 'vitest'
import type { SavedLoop } from '@shared/contracts/saved-loops'
import { SavedLoops } from '@client/features/practice/saved-loops'
import { answering, fine, refused, show } from '../account/answering'
import { standInForLayers } from '../ui/layers-stand-in'

standInForLayers()
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const id = (n: number): string => `00000000-0000-4000-8000-00000000000${n}`
const takeId = id(1)
const path = `/api/takes/${takeId}/saved-loops`
const loop = (n: number, name: string, more: Partial<SavedLoop> = {}): SavedLoop => ({
  id: id(n),
  takeId,
  name,
  span: { startSec: n, endSec: n + 4 },
  rate: 0.6,
  ladder: null,
  restBeats: 0,
  createdAt: '2026-12-01T10:00:00.000Z',
  updatedAt: '2026-12-01T10:00:00.000Z',
  ...more
})
const current = { span: { startSec: 3, endSec: 9 }, rate: 0.5, ladder: null, restBeats: 4 }

/** A server that keeps what it is told. */
const serve = (kept: SavedLoop[]) => {
  const asked: { method: string; url: string; body: unknown }[] = []
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    const method = init.method ?? 'GET'
    const body = init.body ? JSON.parse(String(init.body)) : null
    asked.push({ method, url, body })
    const at = kept.findIndex((one) => url.endsWith(one.id))
    if (method === 'POST') kept.push({ ...loop(9, ''), ...body })
    if (method === 'PATCH') kept[at] = { ...kept[at], ...body }
    if (method === 'DELETE') kept.splice(at, 1)
    const answer = {
      GET: { items: kept.toSorted((a, b) => a.span.startSec - b.span.startSec) },
      POST: kept.at(-1),
      PATCH: kept[at],
      DELETE: {}
    }[method]
    return new Response(JSON.stringify(answer), { status: 200 })
  })
  return asked
}
const open = (props: Partial<Parameters<typeof SavedLoops>[0]> = {}) => {
  const onLoop = vi.fn()
  const wordsFor = (span: { startSec: number }) => `bar ${span.startSec}`
  show(<SavedLoops takeId={takeId} current={current} wordsFor={wordsFor} onLoop={onLoop} {...props} />)
  return { user: userEvent.setup(), onLoop }
}
const names = () =>
  screen.getAllByRole('button', { name: /^Loop “/ }).map((button) => button.getAttribute('aria-label'))

describe('SavedLoops', () => {
  it('says place, speed, ladder and rest of each loop, and loops it', async () => {
    serve([
      loop(2, 'Turnaround', { ladder: { from: 0.6, to: 1, step: 0.05, every: 4 }, restBeats: 1 }),
      loop(5, 'Bridge')
    ])
    const { user, onLoop } = open({ loopingId: id(5) })
    const turnaround = (await screen.findByText('Turnaround')).closest('li')
    expect(turnaround?.textContent).toContain('bar 2 · 60 % to 100 %, up 5 after 4 times · 1 beat of rest')
    expect(screen.getByRole('button', { name: '“Bridge” is looping', pressed: true })).toBeTruthy()
    await user.click(screen.getByRole('button', { name: 'Loop “Turnaround”' }))
    expect(onLoop).toHaveBeenCalledWith(expect.objectContaining({ id: id(2), rate: 0.6 }))
  })

  it('keeps what is looped under the name written, or its place, in the order of the take', async () => {
    const asked = serve([loop(2, 'Early'), loop(7, 'Late')])
    const { user } = open()
    await screen.findByText('Late')
    await user.type(screen.getByLabelText('Name of this loop'), 'Middle{Enter}')
    expect(names()).toEqual(['Loop “Early”', 'Loop “Middle”', 'Loop “Late”'])
    await user.click(screen.getByRole('button', { name: 'Keep this loop' }))
    await waitFor(() => expect(asked.filter(({ method }) => method === 'POST')).toHaveLength(2))
    expect(asked.filter(({ method }) => method === 'POST').map(({ body }) => body)).toEqual([
      { ...current, id: expect.any(String), name: 'Middle' },
      { ...current, id: expect.any(String), name: 'bar 3' }
    ])
  })

  it('renames by keyboard alone, and Esc keeps the old name', async () => {
    const asked = serve([loop(2, 'Turnaround')])
    const { user } = open()
    const rename = async (keys: string) => {
      screen.getByRole('button', { name: 'More about “Turnaround”' }).focus()
      await user.keyboard('{Enter}')
      await user.keyboard('{Enter}')
      await user.keyboard(keys)
    }
    await screen.findByText('Turnaround')
    await rename('Nothing{Escape}')
    expect(names()).toEqual(['Loop “Turnaround”'])
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Loop “Turnaround”' }))
    await rename('Last four{Enter}')
    expect(names()).toEqual(['Loop “Last four”'])
    await waitFor(() =>
      expect(asked).toContainEqual({ method: 'PATCH', url: `/api/saved-loops/${id(2)}`, body: { name: 'Last four' } })
    )
  })

  it('deletes at once and brings back the same loop', async () => {
    const asked = serve([loop(2, 'Turnaround'), loop(5, 'Bridge')])
    const { user } = open()
    await user.click(await screen.findByRole('button', { name: 'More about “Turnaround”' }))
    await user.click(screen.getByRole('menuitem', { name: 'Delete', hidden: true }))
    expect(names()).toEqual(['Loop “Bridge”'])
    expect(document.activeElement).toBe(screen.getByRole('region', { name: 'Saved loops' }))
    await user.click(
      within(screen.getByText('“Turnaround” deleted.').closest('div')!).getByRole('button', { name: 'Undo' })
    )
    await waitFor(() => expect(names()).toEqual(['Loop “Turnaround”', 'Loop “Bridge”']))
    await waitFor(() => expect(asked.map(({ method }) => method)).toContain('POST'))
    const { takeId: _take, createdAt: _created, updatedAt: _updated, ...kept } = loop(2, 'Turnaround')
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual(kept)
  })

  it('says what belongs here when nothing does, and goes back when the server refuses', async () => {
    answering({ [`GET ${path}`]: fine({ items: [] }), [`POST ${path}`]: refused('over-quota') })
    const { user } = open()
    expect(await screen.findByText(/Only you see them/)).toBeTruthy()
    await user.click(screen.getByRole('button', { name: 'Keep this loop' }))
    expect(await screen.findByRole('alert')).toBeTruthy()
    await waitFor(() => expect(screen.queryByRole('button', { name: /^Loop “/ })).toBeNull())
    cleanup()
    open({ current: null })
    expect(screen.getByText('Select bars to keep them as a loop.')).toBeTruthy()
  })
})
