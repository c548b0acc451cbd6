import { cleanup, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, it, vi } from 'vitest'
import type { Clip, ClipSettings } from '@shared/contracts/clips'
import { plainAids } from '@shared/audio/listening'
import { ClipDialog, type ClipPassage } from '@client/features/clips/clip-dialog'
import { plainMap } from '../../unit/shared/practice/plain-map'
import { answering, fine, refused, show } from '../account/answering'
import { standInForLayers } from '../ui/layers-stand-in'

standInForLayers()
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const takeId = '00000000-0000-4000-8000-000000000001'
const path = `/api/takes/${takeId}/clips`
const click = { pattern: '2 and 4', subdivision: 1, silence: null } as const
const passage: ClipPassage = {
  span: { startSec: 4, endSec: 8 },
  rate: 0.5,
  semitones: 0,
  aids: { ...plainAids, isOctaveUp: true },
  click,
  clickLevel: 0.8,
  isClickOn: true,
  countIn: 'none'
}
const settings: ClipSettings = {
  span: passage.span,
  rate: 0.5,
  semitones: 0,
  aids: passage.aids,
  click,
  clickLevel: 0.8,
  countIn: 'one bar',
  format: 'wav'
}
const clip = (more: Partial<Clip> = {}): Clip => ({
  id: '00000000-0000-4000-8000-000000000002',
  takeId,
  settings,
  state: 'waiting',
  stage: null,
  progress: 0,
  fault: null,
  fileName: 'Slack Tide, bars 3-4, 50 %.wav',
  durationSec: 12,
  bytes: null,
  createdAt: '2026-12-01T10:00:00.000Z',
  expiresAt: '2026-12-08T10:00:00.000Z',
  ...more
})
const open = (more: Partial<Parameters<typeof ClipDialog>[0]> = {}) => {
  const wordsFor = () => 'bars 3 to 4'
  show(<ClipDialog {...{ takeId, passage, wordsFor, barMap: plainMap('4/4'), onClose: vi.fn(), ...more }} />)
  return userEvent.setup()
}

describe('ClipDialog', () => {
  it('says what the file will hold, asks for it, and shows how far it is until it can be fetched', async () => {
    let now = clip()
    const asked = answering({
      [`GET ${path}`]: () => fine({ items: asked.some(({ method }) => method === 'POST') ? [now] : [] }),
      [`POST ${path}`]: () => fine(now, 201)
    })
    const user = open()
    const said = () => screen.getByText(/50 % speed/).textContent
    expect(said()).toBe('50 % speed · +12 semitones · click: 2 and 4 · 0:08.0 long')
    await user.click(screen.getByRole('checkbox', { name: 'With the click' }))
    expect(said()).toBe('50 % speed · +12 semitones · 0:08.0 long')
    await user.click(screen.getByRole('checkbox', { name: 'With the click' }))
    await user.click(screen.getByRole('radio', { name: 'One bar' }))
    await user.click(screen.getByRole('radio', { name: /^WAV/ }))
    await user.click(screen.getByRole('button', { name: 'Make the file' }))
    await screen.findByText(/Waiting its turn/)
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
      id: expect.any(String),
      place: 'bars 3 to 4',
      settings
    })
    now = clip({ state: 'working', stage: 'Playing it', progress: 0.4 })
    await waitFor(
      () => expect(screen.getByRole('progressbar').getAttribute('aria-valuetext')).toBe('Playing it, 40 %'),
      { timeout: 3000 }
    )
    now = clip({ state: 'ready', progress: 1, bytes: 1000 })
    const link = await screen.findByRole('link', { name: /Download/ }, { timeout: 3000 })
    expect(link.getAttribute('href')).toBe(`/api/clips/${now.id}/file`)
  })

  it('stops a file that is being made, and says why one was not', async () => {
    let items = [clip(), clip({ id: '00000000-0000-4000-8000-000000000003', state: 'failed', fault: 'It is broken.' })]
    answering({
      [`GET ${path}`]: () => fine({ items }),
      [`DELETE /api/clips/${clip().id}`]: () => {
        items = items.slice(1)
        return fine({})
      }
    })
    const user = open({ passage: null })
    await screen.findByText('It is broken.')
    expect(screen.queryByRole('button', { name: 'Make the file' })).toBeNull()
    await user.click(screen.getByRole('button', { name: /^Stop making/ }))
    await waitFor(() => expect(screen.queryByRole('progressbar')).toBeNull())
    expect(screen.getByText('It is broken.')).toBeTruthy()
  })

  it('offers no click without bars, nothing too long, and tells a refusal', async () => {
    answering({
      [`GET ${path}`]: fine({ items: [] }),
      [`POST ${path}`]: refused('over-quota', { detail: 'Wait until one of your files is ready, or stop one.' })
    })
    const user = open({ barMap: null, passage: { ...passage, countIn: 'two bars' } })
    expect(screen.queryByRole('checkbox')).toBeNull()
    await user.click(screen.getByRole('button', { name: 'Make the file' }))
    await screen.findByText(/Wait until one of your files is ready/)
    cleanup()
    open({ passage: { ...passage, span: { startSec: 0, endSec: 301 } } })
    expect(screen.getByText(/lasts 10 minutes at most/)).toBeTruthy()
    expect((screen.getByRole('button', { name: 'Make the file' }) as HTMLButtonElement).disabled).toBe(true)
  })
})
