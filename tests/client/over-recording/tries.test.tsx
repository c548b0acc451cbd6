import { cleanup, render, renderHook, screen, waitFor, act } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { keepDelay, keptDelay, wayOf } from '@client/features/over-recording/delay-store'
import { OverRecording } from '@client/features/over-recording/over-recording'
import { speedWords } from '@client/features/over-recording/played-words'
import { TryList } from '@client/features/over-recording/try-list'
import type { OneTry, Recorded } from '@client/features/over-recording/try-store'
import { useTries } from '@client/features/over-recording/use-tries'
import { defaultPreferences } from '@shared/practice/preferences'
import { createStillPlayer } from '../timeline/still-player'
import { createMemoryStore } from './fake-input'

// jsdom's element can neither stop nor load.
for (const name of ['pause', 'load'] as const) HTMLMediaElement.prototype[name] = () => undefined

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
  localStorage.clear()
})

const oneTry = (number: number, rate = 1): OneTry => ({
  id: `try-${number}`,
  number,
  cut: { fromFrame: 0, frames: 12_000, placeSec: 4, rate },
  isGone: false
})
const recorded = (id: string, startedMs: number, ...tries: OneTry[]): Recorded => ({
  id,
  ownerId: 'ines',
  takeId: 'low-water',
  startedMs,
  sampleRate: 1000,
  channels: 1,
  pieces: 12,
  frames: 12_000,
  tries
})

describe('the list of tries', () => {
  it('names each with its length, place and speed, and hands on what is pressed', async () => {
    const acts = { onListen: vi.fn(), onPause: vi.fn(), onKeep: vi.fn(), onDrop: vi.fn() }
    const [first, second] = [oneTry(1), oneTry(2, 0.7)]
    const whole = recorded('a', Date.now(), first, second)
    const tries = [first, second].map((one) => ({ recorded: whole, one }))
    const list = (heardId: string | null) => (
      <TryList
        {...acts}
        tries={tries}
        placeWords={({ one }) => `bars ${one.number}`}
        heardId={heardId}
        sending={new Set(['try-1'])}
        areBusy={false}
      />
    )
    const user = userEvent.setup()
    const { rerender } = render(list(null))
    const items = screen.getAllByRole('listitem').map(({ textContent }) => textContent ?? '')
    expect(items[0]).toMatch(/Try 1 · bars 1.*0:12\.0 long, /)
    expect(items[0]).toMatch(/On its way/)
    expect(items[1]).toMatch(/at 70 %/)
    await user.click(screen.getByRole('button', { name: 'Listen to try 2 with the take' }))
    await user.click(screen.getByRole('button', { name: 'Keep try 2' }))
    await user.click(screen.getByRole('button', { name: 'Throw away try 2' }))
    for (const each of [acts.onListen, acts.onKeep, acts.onDrop]) expect(each).toHaveBeenCalledExactlyOnceWith(tries[1])
    rerender(list('try-2'))
    await user.click(screen.getByRole('button', { name: 'Pause try 2' }))
    expect(acts.onPause).toHaveBeenCalledOnce()
    expect(screen.queryByRole('button', { name: 'Keep try 1' })).toBeNull()
  })
})

describe('tries that wait for a word', () => {
  it('are found again by whom and over which take they were played, and leave the browser with the last of them', async () => {
    const store = createMemoryStore()
    await store.putBegun(recorded('early', 1, oneTry(1), oneTry(2)))
    await store.putBegun({ ...recorded('theirs', 2, oneTry(7)), ownerId: 'tomas' })
    await store.putBegun({ ...recorded('elsewhere', 3, oneTry(8)), takeId: 'ferry-money' })
    await store.putBegun(recorded('empty', 4))
    const { result } = renderHook(() => useTries('ines', 'low-water', store))
    await waitFor(() => expect(result.current.listed.map(({ one }) => one.number)).toEqual([1, 2]))
    expect([result.current.nextNumber, store.begun.has('empty')]).toEqual([3, false])
    act(() => result.current.add(recorded('late', 5, oneTry(3))))
    act(() => result.current.drop('try-1'))
    expect(result.current.listed.map(({ one }) => one.number)).toEqual([2, 3])
    expect(result.current.nextNumber).toBe(4)
    expect(store.begun.get('early')?.tries.map(({ isGone }) => isGone)).toEqual([true, false])
    act(() => result.current.drop('try-2'))
    expect([...store.begun.keys()]).toEqual(['theirs', 'elsewhere'])
  })
})

describe('Record over it', () => {
  const show = () =>
    render(
      <OverRecording
        take={{ id: 'low-water', title: 'Low Water' }}
        source={{ url: '/audio', durationSec: 20 }}
        player={createStillPlayer(20)}
        barMap={null}
        ownerId="ines"
        selection={null}
        wordsFor={() => 'bar 1'}
        click={defaultPreferences.click}
        countIn="none"
        onBegin={() => undefined}
        renderKeep={() => null}
        onClose={() => undefined}
      />
    )
  it('says why there is no microphone where the address is not a secure one', () => {
    vi.stubGlobal('isSecureContext', false)
    show()
    expect(screen.getByRole('alert').textContent).toMatch(/only to pages that come over https/)
    expect(screen.queryByRole('button', { name: 'Use the microphone' })).toBeNull()
  })
  it('is off, and says why, where the page has to play with the browser’s own element', () => {
    vi.stubGlobal('isSecureContext', true)
    vi.stubGlobal('navigator', Object.assign(Object.create(navigator), { mediaDevices: {} }))
    show()
    expect(screen.getByRole('alert').textContent).toMatch(/Recording over a take is off here.*could not be laid under/)
    expect(screen.queryByRole('button', { name: 'Use the microphone' })).toBeNull()
  })
})

describe('the delay that was measured', () => {
  const streamOf = (deviceId: string) => ({ getAudioTracks: () => [{ getSettings: () => ({ deviceId }) }] }) as never
  const output = (deviceId: string, label: string) => ({ kind: 'audiooutput' as const, deviceId, label })
  it('holds for the way it was measured on, and no other', () => {
    const way = wayOf(streamOf('line-in'), [output('default', 'Headphones'), output('a', 'Headphones')])
    keepDelay(way, { delaySec: 0.087, measuredMs: 1 })
    expect(keptDelay(way)?.delaySec).toBe(0.087)
    expect(keptDelay(wayOf(streamOf('built-in'), [output('default', 'Headphones')]))).toBeNull()
    expect(keptDelay(wayOf(streamOf('line-in'), [output('default', 'Radio headphones')]))).toBeNull()
  })
  it('is none where what is stored cannot be read', () => {
    localStorage.setItem('plumbline.delays', '{"x":{"delaySec":"long"}}')
    expect(keptDelay('x')).toBeNull()
  })
})

describe('speedWords', () => {
  it('tells the speed of the desk, or of its loop that gets faster', () => {
    expect(speedWords({ rate: 0.7 }, null)).toBe('At 70 %, as set on the desk.')
    const ladder = { from: 0.6, to: 1, step: 0.05, every: 4 }
    expect(speedWords({ rate: 1 }, { span: { startSec: 0, endSec: 1 }, ladder })).toMatch(/^From 60 % to 100 %/)
  })
})
