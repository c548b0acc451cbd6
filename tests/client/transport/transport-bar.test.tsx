import { act, cleanup, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { plainAids } from '@shared/audio/listening'
import { defaultPreferences, type ClickSettings } from '@shared/practice/preferences'
import { soloControls } from '@client/transport/controls'
import { TransportBar, type TransportBarProps } from '@client/transport/transport-bar'
import { useAids } from '@client/transport/use-aids'
import { useLoopManner } from '@client/transport/use-loop-manner'
import { tapWords, useTapTempo } from '@client/transport/use-tap-tempo'
import { furnishPage } from '../timeline/still-player'
import { standInForLayers } from '../ui/layers-stand-in'
import { practisingPlayer, type PractisingPlayer } from './practising-player'

beforeEach(() => {
  furnishPage()
  standInForLayers()
})
afterEach(cleanup)

const selection = { startSec: 4, endSec: 12 }
const fourFour = { upper: 4, lower: 4, pulse: 1 }
type Extra = Partial<Omit<TransportBarProps, 'player'>> & {
  hasClick?: boolean
  meter?: typeof fourFour | null
  tuningCents?: number | null
}

function Bar({
  player,
  hasClick = true,
  meter = fourFour,
  tuningCents = null,
  ...extra
}: Extra & { player: PractisingPlayer }) {
  const [topHz, setTopHz] = useState(300)
  const [settings, setSettings] = useState<ClickSettings>(defaultPreferences.click)
  const [countIn, setCountIn] = useState(defaultPreferences.countIn)
  const manner = useLoopManner(player, null)
  const controls = soloControls(player, manner.ways)
  const click = {
    settings,
    countIn,
    meter,
    canClick: player.capabilities.clicks,
    change: (part: Partial<ClickSettings>) => setSettings({ ...settings, ...part }),
    setCountIn
  }
  return (
    <TransportBar
      player={player}
      commands={{
        playPause: vi.fn(),
        setRate: controls.setRate,
        setLoop: controls.setLoop,
        nudge: vi.fn(),
        againBefore: vi.fn()
      }}
      selection={selection}
      spanWords={() => 'bars 3 to 6'}
      tempoNow={() => 120}
      listening={useAids(player, { topHz, onTopHz: setTopHz }, tuningCents)}
      manner={manner}
      tapping={useTapTempo(() => null)}
      {...(hasClick ? { click } : {})}
      volume={0.7}
      onVolume={vi.fn()}
      onKeySheet={vi.fn()}
      {...extra}
    />
  )
}
const open = (player = practisingPlayer(), extra: Extra = {}) => {
  render(<Bar player={player} {...extra} />)
  return { player, user: userEvent.setup() }
}
const sentence = () => screen.getByRole<HTMLInputElement>('textbox', { name: 'How the loop gets faster' })
const faster = () => screen.getByRole('checkbox', { name: 'The loop gets faster' })
const loopButton = () => screen.getByRole('button', { name: /^Loop/ })

describe('the sentence of a loop that gets faster', () => {
  it('is read as typed, said back in its own words, and goes round in the loop', async () => {
    const { user, player } = open()
    await user.click(loopButton())
    expect(player.loop).toEqual({ span: selection })
    await user.click(faster())
    expect(player.loop?.ladder).toEqual({ from: 0.6, to: 1, step: 0.05, every: 4 })
    await user.clear(sentence())
    await user.type(sentence(), '50-90 by 10 twice{Enter}')
    expect(sentence().value).toBe('50 % to 90 %, up 10 after 2 times')
    expect(player.loop?.ladder).toEqual({ from: 0.5, to: 0.9, step: 0.1, every: 2 })
    await user.click(faster())
    expect(player.loop).toEqual({ span: selection })
  })

  it('says what is wrong with it and keeps what was typed; Esc takes it back', async () => {
    const { user } = open()
    await user.clear(sentence())
    await user.type(sentence(), 'from 60{Enter}')
    expect(sentence().value).toBe('from 60')
    expect(sentence().getAttribute('aria-invalid')).toBe('true')
    const fault = document.getElementById(sentence().getAttribute('aria-describedby') ?? '')
    expect(fault?.textContent).toContain('Say where it ends: 60 % to 100 %.')
    await user.type(sentence(), '{Escape}')
    expect(sentence().value).toBe('60 % to 100 %, up 5 after 4 times')
    expect(sentence().getAttribute('aria-invalid')).toBeNull()
  })

  it('shows pass and speed, and lets go of the speed when a hand sets it', async () => {
    const { user, player } = open()
    await user.click(faster())
    expect(screen.getByText('It gets faster as soon as a loop is on.')).toBeTruthy()
    await user.click(loopButton())
    act(() => {
      player.setRate(0.65)
      player.turn(4)
    })
    expect(loopButton().textContent).toContain('5th time at 65 %')
    screen.getByRole('slider', { name: 'Speed' }).focus()
    await user.keyboard('{PageUp}')
    expect(player.rate).toBe(0.75)
    expect(player.loop).toEqual({ span: selection })
    expect((faster() as HTMLInputElement).checked).toBe(false)
  })

  it('sets the speed pass by pass where the engine cannot plan ahead', async () => {
    const player = practisingPlayer({ pitch: false, schedule: false, aids: false, clicks: false })
    const { user } = open(player)
    await user.click(faster())
    await user.click(loopButton())
    expect(player.rate).toBe(0.6)
    act(() => player.turn(3))
    expect(player.rate).toBe(0.6)
    act(() => player.turn(4))
    expect(player.rate).toBe(0.65)
  })

  it('is for practising alone', () => {
    open(practisingPlayer(), { isShared: true })
    expect(sentence().disabled).toBe(true)
    expect((faster() as HTMLInputElement).disabled).toBe(true)
    expect(screen.getByRole('group', { name: 'Faster, when you practise alone' })).toBeTruthy()
  })
})

describe('listening', () => {
  it('switches octave and low focus, and says all that is not as recorded', async () => {
    const { user, player } = open()
    await user.click(screen.getByRole('checkbox', { name: 'octave up' }))
    await user.click(screen.getByRole('checkbox', { name: 'low focus' }))
    expect(player.aids).toEqual({ ...plainAids, isOctaveUp: true, lowFocus: { isOn: true, topHz: 300 } })
    await user.click(screen.getByRole('button', { name: 'to 300 Hz' }))
    const box = within(screen.getByRole('dialog', { name: 'Listening', hidden: true }))
    box.getByRole('slider', { name: 'Pitch', hidden: true }).focus()
    await user.keyboard('{PageDown}')
    await user.selectOptions(box.getByRole('combobox', { name: 'Listen to', hidden: true }), 'left')
    expect(player.semitones).toBe(-2)
    expect(screen.getByRole('button', { name: 'to 300 Hz · 2 semitones down · left side' })).toBeTruthy()
    await user.click(box.getByRole('button', { name: 'As recorded', hidden: true }))
    expect([player.semitones, player.aids]).toEqual([0, plainAids])
  })

  it('offers to mend the tuning of the take, and to leave it', async () => {
    const { user, player } = open(practisingPlayer(), { tuningCents: -18.3 })
    await user.click(screen.getByRole('button', { name: 'as recorded' }))
    expect(screen.getByText(/^The take is 18 cents low/)).toBeTruthy()
    await user.click(screen.getByRole('button', { name: 'tune it', hidden: true }))
    expect(player.aids.cents).toBe(18)
    await user.click(screen.getByRole('button', { name: 'leave it as tuned', hidden: true }))
    expect(player.aids.cents).toBe(0)
  })

  it.each([null, 0, 3, -3])('offers no tuning where the take is %s cents off', async (tuningCents) => {
    const { user } = open(practisingPlayer(), { tuningCents })
    await user.click(screen.getByRole('button', { name: 'as recorded' }))
    expect(screen.getByRole('slider', { name: 'Fine tune', hidden: true })).toBeTruthy()
    expect(screen.queryByText(/^The take is/)).toBeNull()
  })

  it('disables what the engine lacks and says so quietly', () => {
    open(practisingPlayer({ pitch: false, schedule: false, aids: false, clicks: false }))
    for (const name of ['octave up', 'low focus', 'click'])
      expect(screen.getByRole<HTMLInputElement>('checkbox', { name }).disabled).toBe(true)
    expect(screen.getByRole<HTMLButtonElement>('button', { name: 'as recorded' }).disabled).toBe(true)
    expect(screen.getByText(/^In this browser there is no other pitch,/)).toBeTruthy()
  })
})

describe('the click', () => {
  it('is said in the words of the meter and chosen from lists', async () => {
    const { user } = open(practisingPlayer(), { meter: { upper: 3, lower: 4, pulse: 1 } })
    await user.click(screen.getByRole('button', { name: 'every beat' }))
    const list = (name: string) => screen.getByRole('combobox', { name, hidden: true })
    await user.selectOptions(list('It strikes'), '2 and 3')
    await user.selectOptions(list('Each beat'), 'In two, swung 2 to 1')
    await user.selectOptions(list('Silent bars, to test your time'), 'Every fourth bar')
    await user.selectOptions(list('Before the start'), 'Count one bar in')
    expect(
      screen.getByRole('button', {
        name: '2 and 3, each beat in two, swung 2 to 1, silent every fourth bar · counts one bar in'
      })
    ).toBeTruthy()
  })

  it('waits for bars, in words, and is left out where there never are any', () => {
    open(practisingPlayer(), { meter: null })
    expect(screen.getByRole<HTMLInputElement>('checkbox', { name: 'click' }).disabled).toBe(true)
    expect(screen.getByText('once its bars are laid')).toBeTruthy()
    cleanup()
    open(practisingPlayer(), { hasClick: false })
    expect(screen.queryByRole('checkbox', { name: 'click' })).toBeNull()
  })
})

describe('between passes', () => {
  it('rests for beats and softens the ends of the loop that is on', async () => {
    const { user, player } = open()
    await user.click(loopButton())
    await user.click(screen.getByRole('button', { name: 'none' }))
    await user.selectOptions(screen.getByRole('combobox', { name: 'Rest between two passes', hidden: true }), '4 beats')
    await user.click(screen.getByRole('checkbox', { name: 'Soft ends', hidden: true }))
    // Without bars a beat is half a second.
    expect(player.loop).toEqual({ span: selection, restSec: 2, fadeSec: 0.03 })
    expect(screen.getByRole('button', { name: '4 beats of rest, soft ends' })).toBeTruthy()
  })
})

describe('tapWords', () => {
  it('asks for more taps, then says the tempo and how it stands to the take', () => {
    expect(tapWords([0, 0.5], 120)).toBe('tap on, on every beat')
    expect(tapWords([0, 0.5, 1, 1.5], null)).toBe('you tap 120 beats a minute')
    expect(tapWords([0, 0.5, 1, 1.5], 60)).toBe('you tap 120, the take plays 60 here: double time')
  })
})

it('keeps one tab stop for the bar, and none for what a box on it holds', async () => {
  const { user } = open()
  await user.click(screen.getByRole('button', { name: 'as recorded' }))
  await user.tab()
  expect(document.activeElement).toBe(screen.getByRole('slider', { name: 'Pitch', hidden: true }))
  expect(screen.getByRole('checkbox', { name: 'octave up' }).tabIndex).toBe(-1)
})
