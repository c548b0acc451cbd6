import { QueryClientProvider } from '@tanstack/react-query'
import { cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createQueryClient } from '@client/lib/query'
import { NewTune } from '@client/features/tunes/new-tune'
import { standInForLayers } from '../ui/layers-stand-in'

vi.setConfig({ testTimeout: 30_000 })
beforeEach(standInForLayers)
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const groupId = '22222222-2222-4222-8222-222222222222'

const open = () => {
  const sent: { address: string; body: Record<string, unknown> }[] = []
  vi.stubGlobal('fetch', async (address: string, init: { body: string }) => {
    const body = JSON.parse(init.body) as Record<string, unknown>
    sent.push({ address, body })
    const tune = {
      id: body['id'],
      groupId,
      title: body['title'],
      createdBy: null,
      createdAt: '2026-11-24T10:00:00Z',
      takeCount: 0,
      chart: body['chart'],
      chartRevision: 1,
      abilities: []
    }
    return new Response(JSON.stringify(tune), { status: 201 })
  })
  const onCreated = vi.fn()
  render(
    <QueryClientProvider client={createQueryClient()}>
      <NewTune groupId={groupId} onCreated={onCreated} onClose={() => undefined} />
    </QueryClientProvider>
  )
  return { sent, onCreated, user: userEvent.setup() }
}

const submit = () => fireEvent.submit(screen.getByLabelText('Title').closest('form') as HTMLFormElement)

describe('NewTune', () => {
  it('asks for a title before anything is sent', () => {
    const { sent } = open()
    submit()
    expect(screen.getByText('A tune needs a title.')).toBeDefined()
    expect(sent).toEqual([])
  })

  it('names a faulty bar of the chart, keeps the text and sends nothing', async () => {
    const { sent, user } = open()
    await user.type(screen.getByLabelText('Title'), 'Low Water')
    const chart = screen.getByLabelText<HTMLTextAreaElement>(/^Chart/)
    fireEvent.change(chart, { target: { value: '| Dm7 | Hx7 |' } })
    submit()
    expect(screen.getByText(/Bar 2:/)).toBeDefined()
    expect(chart.value).toBe('| Dm7 | Hx7 |')
    expect(sent).toEqual([])
  })

  it('adds the tune with its key, meter and chart', async () => {
    const { sent, onCreated, user } = open()
    await user.type(screen.getByLabelText('Title'), 'Low Water')
    await user.type(screen.getByLabelText(/^Key/), 'D minor')
    fireEvent.change(screen.getByLabelText('Meter'), { target: { value: '3/4' } })
    fireEvent.change(screen.getByLabelText(/^Chart/), { target: { value: '[A]\n| Dm7 | A7 |\n[A]' } })
    submit()
    await waitFor(() => expect(onCreated).toHaveBeenCalledOnce())
    expect(sent).toHaveLength(1)
    expect(sent[0]?.address).toBe(`/api/groups/${groupId}/tunes`)
    const chart = sent[0]?.body['chart'] as { key: string; meter: string; order: string[]; sections: unknown[] }
    expect([chart.key, chart.meter, chart.sections.length, chart.order.length]).toEqual(['D minor', '3/4', 1, 2])
  })
})
