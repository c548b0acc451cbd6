import { act, cleanup, screen, waitFor } from '@testing-library/react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { defaultPreferences, type Preferences } from '@shared/practice/preferences'
import { createBarMap } from '@shared/timing/bar-map'
import { rational } from '@shared/timing/rational'
import { quietVolume, useVolume } from '@client/features/practice/use-volume'
import { useClicks } from '@client/features/practice/use-clicks'
import { answering, fine, show } from '../account/answering'
import { practisingPlayer, type PractisingPlayer } from '../transport/practising-player'

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

/** Four bars of two seconds. */
const barMap = createBarMap({
  anchors: [1, 5].map((bar) => ({ id: `a${bar}`, sec: (bar - 1) * 2, position: { bar, beat: rational(1) } })),
  meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
  marks: []
})

function Desk({ player, hasBars }: { player: PractisingPlayer; hasBars: boolean }) {
  const { volume, onVolume } = useVolume(player)
  const { change } = useClicks(player, hasBars ? barMap : null, 8)
  return (
    <>
      <button type="button" onClick={() => onVolume(0.9)}>
        {volume}
      </button>
      <button type="button" onClick={() => change({ isOn: false })}>
        off
      </button>
    </>
  )
}
const path = '/api/me/preferences'
const open = (preferences: Preferences, hasBars = true) => {
  const player = practisingPlayer()
  const asked = answering({ [`GET ${path}`]: fine(preferences), [`PATCH ${path}`]: fine(preferences) })
  show(<Desk player={player} hasBars={hasBars} />)
  return { player, asked }
}

describe('useVolume', () => {
  it('is soft until it is known how loud it was, then as it was left', async () => {
    const { player } = open({ volume: 0.45 })
    expect(player.volume).toBe(quietVolume)
    await waitFor(() => expect(player.volume).toBe(0.45))
  })

  it('starts at the safe default where nothing was ever set', async () => {
    const { player } = open({})
    await waitFor(() => expect(player.volume).toBe(defaultPreferences.volume))
  })

  it('never makes louder what sounds already, and softer at once', async () => {
    const player = practisingPlayer()
    player.state = 'playing'
    answering({ [`GET ${path}`]: fine({ volume: 0.8 }) })
    show(<Desk player={player} hasBars={false} />)
    await act(async () => new Promise((resolve) => setTimeout(resolve, 50)))
    expect(player.volume).toBe(quietVolume)
    cleanup()
    answering({ [`GET ${path}`]: fine({ volume: 0.1 }) })
    show(<Desk player={player} hasBars={false} />)
    await waitFor(() => expect(player.volume).toBe(0.1))
  })

  it('is kept when it is set', async () => {
    const { player, asked } = open({ volume: 0.45 })
    await waitFor(() => expect(player.volume).toBe(0.45))
    act(() => screen.getByRole('button', { name: '0.45' }).click())
    expect(player.volume).toBe(0.9)
    await waitFor(() =>
      expect(asked.filter(({ method }) => method === 'PATCH').map(({ body }) => body)).toEqual([{ volume: 0.9 }])
    )
  })
})

describe('useClicks', () => {
  const click = { ...defaultPreferences.click, isOn: true, pattern: '2 and 4' as const, level: 0.4 }

  it('lays the pattern along the whole take, and lifts it when switched off', async () => {
    const { player } = open({ click })
    await waitFor(() => expect(player.clicks[0]).not.toBeNull())
    expect(player.clicks[0]?.map(({ sec }) => sec)).toEqual([0.5, 1.5, 2.5, 3.5, 4.5, 5.5, 6.5, 7.5])
    expect(player.clicks[1]).toBe(0.4)
    act(() => screen.getByRole('button', { name: 'off' }).click())
    await waitFor(() => expect(player.clicks[0]).toBeNull())
  })

  it('counts in at the speed that is played, and not at all without bars', async () => {
    const { player } = open({ countIn: 'one bar' })
    await waitFor(() => expect(player.countIn?.(2, 0.5)?.leadSec).toBe(4))
    cleanup()
    const barless = open({ click, countIn: 'one bar' }, false)
    await waitFor(() => expect(barless.player.volume).toBe(0.7))
    expect([barless.player.countIn, barless.player.clicks[0]]).toEqual([null, null])
  })
})
