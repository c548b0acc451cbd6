import { cleanup, fireEvent, screen, waitFor } from '@testing-library/react'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { deskModel } from '@client/app/desk/desk-model'
import { againBefore } from '@client/app/desk/desk-transport'
import { useDeskKeys } from '@client/app/desk/use-desk-keys'
import { useDeskPractice } from '@client/app/desk/use-desk-practice'
import { soloControls } from '@client/transport/controls'
import { rational } from '@shared/timing/rational'
import type { Preferences } from '@shared/practice/preferences'
import { answering, fine, show } from '../account/answering'
import { practisingPlayer, whole, type PractisingPlayer } from '../transport/practising-player'

beforeEach(() => vi.useRealTimers())
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

/** Bars of two seconds. */
const model = deskModel({
  durationSec: 20,
  bars: {
    anchors: [1, 11].map((bar) => ({ id: `a${bar}`, sec: (bar - 1) * 2, position: { bar, beat: rational(1) } })),
    meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
    marks: []
  },
  chart: null
})

function Desk({ player, said }: { player: PractisingPlayer; said: (words: string) => void }) {
  const practice = useDeskPractice(player, model, null)
  const controls = soloControls(player, practice.manner.ways)
  useDeskKeys({
    player,
    controls,
    model,
    practice,
    selection: null,
    snap: 'bar',
    timeline: { current: null },
    onSelect: vi.fn(),
    onFollow: vi.fn(),
    onWrite: vi.fn(),
    onUndo: vi.fn(),
    onAgainBefore: () => againBefore({ player, controls, model }),
    onKeySheet: vi.fn(),
    say: said
  })
  return (
    <>
      <input aria-label="Words" />
      <output>{practice.tapping.words ?? 'no taps'}</output>
      <output>{practice.click.settings.isOn ? 'clicking' : 'silent'}</output>
    </>
  )
}
const open = async (preferences: Preferences = {}, player = practisingPlayer()) => {
  const said = vi.fn()
  answering({ 'GET /api/me/preferences': fine(preferences), 'PATCH /api/me/preferences': fine(preferences) })
  show(<Desk player={player} said={said} />)
  await waitFor(() => expect(player.volume).toBe(0.7))
  const press = (key: string, more = {}) => fireEvent.keyDown(document.body, { key, ...more })
  return { player, said, press }
}

describe('the keys of practising', () => {
  it('switch octave, low focus, click and count-in, and say so', async () => {
    const { player, said, press } = await open()
    press('o')
    press('b')
    expect([player.aids.isOctaveUp, player.aids.lowFocus.isOn]).toEqual([true, true])
    press('ArrowUp', { shiftKey: true })
    expect(player.semitones).toBe(1)
    press('k')
    await waitFor(() => expect(player.clicks[0]?.length).toBe(40))
    press('n')
    await waitFor(() => expect(player.countIn?.(0, 1)?.leadSec).toBe(2))
    expect(said.mock.calls.flat()).toEqual([
      'An octave up.',
      'Low focus is on.',
      'The click is on.',
      'It counts one bar in.'
    ])
  })

  it('go back two bars and sound', async () => {
    const { player, press } = await open()
    player.heardPosition = 9
    press('a')
    expect([player.heardPosition, player.state]).toEqual([4, 'playing'])
  })

  it('tap a tempo', async () => {
    const { press } = await open()
    press('t')
    expect(screen.getByText('tap on, on every beat')).toBeTruthy()
  })

  it('rest while somebody writes, when switched off, and where nothing can be done', async () => {
    const { player } = await open()
    fireEvent.keyDown(screen.getByLabelText('Words'), { key: 'o' })
    expect(player.aids.isOctaveUp).toBe(false)
    cleanup()
    const off = await open({ areKeysOff: true })
    off.press('o')
    expect(off.player.aids.isOctaveUp).toBe(false)
    cleanup()
    const less = await open({}, practisingPlayer({ ...whole, pitch: false, aids: false, clicks: false }))
    for (const key of ['o', 'b', 'k', 'n']) less.press(key)
    expect(less.said).not.toHaveBeenCalled()
  })

  it('are the ones a person has chosen', async () => {
    const { player, press } = await open({ keys: { octaveUp: ['x'] } })
    press('o')
    expect(player.aids.isOctaveUp).toBe(false)
    press('x')
    expect(player.aids.isOctaveUp).toBe(true)
  })
})
