import { cleanup, fireEvent, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { createBarMap } from '@shared/timing/bar-map'
import { emptyBarMap } from '@shared/timing/bar-map-document'
import { COMMON_METER } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import type { BarMapBody, Span } from '@shared/timing/types'
import { BarEditor } from '@client/features/bar-maps/bar-editor'
import type { TuneHint } from '@client/features/bar-maps/editor-props'
import { useBarEdits } from '@client/features/bar-maps/use-bar-edits'
import { fakePlayer, useKeptBars } from './fake-player'
import { simulateTaps } from '../../unit/shared/timing/simulated-tapper'

afterEach(cleanup)

const blues: TuneHint = { meter: COMMON_METER, formLength: 12, cyclic: true, tempo: { min: 104, max: 132 } }
const waltz: TuneHint = { meter: { upper: 3, lower: 4, pulse: 1 }, formLength: 32, cyclic: true, tempo: null }

/** Bars of two seconds, each line fixed, bar 1 at second 10. */
const steady: BarMapBody = {
  ...emptyBarMap,
  anchors: Array.from({ length: 20 }, (_, i) => ({
    id: `line-${i + 1}`,
    sec: 10 + i * 2,
    position: { bar: i + 1, beat: rational(1) }
  }))
}

interface Setting {
  body?: BarMapBody
  tune?: TuneHint | null
  tapLagMs?: number | null
  selection?: Span | null
}

const open = ({ body = emptyBarMap, tune = blues, tapLagMs = null, selection = null }: Setting = {}) => {
  const { player, controls, asked } = fakePlayer()
  const onPreview = vi.fn<(body: BarMapBody | null) => void>()
  const onTapLag = vi.fn<(ms: number) => void>()
  const kept: { body: BarMapBody } = { body }
  function Host() {
    const document = useKeptBars(body)
    const edits = useBarEdits(document)
    const [bar, setBar] = useState<number | null>(null)
    const [, drawAnew] = useState<BarMapBody | null>(null)
    kept.body = document.body ?? body
    return (
      <BarEditor
        document={document}
        edits={edits}
        player={player}
        controls={controls}
        durationSec={120}
        // A new object every time, as a desk that derives it hands it over.
        tune={tune && { ...tune }}
        selection={selection}
        bar={bar}
        onBar={setBar}
        tapLagMs={tapLagMs}
        onTapLag={onTapLag}
        onPreview={(drawn) => {
          onPreview(drawn)
          drawAnew(drawn)
        }}
        onClose={() => undefined}
      />
    )
  }
  render(<Host />)
  let pad: HTMLElement | null = null
  const tapAt = (sec: number): void => {
    player.heardPosition = sec
    pad ??= screen.getByRole('button', { name: /^Tap on/ })
    fireEvent.keyDown(pad, { key: 't' })
  }
  return { player, asked, onPreview, onTapLag, kept, tapAt, user: userEvent.setup() }
}

const press = (name: string | RegExp) => fireEvent.click(screen.getByRole('button', { name }))
const lineSec = (body: BarMapBody, bar: number): number => createBarMap(body)?.barSec(bar) ?? Number.NaN
const rootMeanSquare = (values: number[]): number =>
  Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length)

// A hundred taps draw the panel a hundred times.
describe('tapping along', { timeout: 30_000 }, () => {
  it.each([1, 2, 3])('lays bars within 15 ms of the truth from a hand with jitter, lag and slips (hand %i)', (seed) => {
    const { truth, taps } = simulateTaps({ seed, lagSec: 0.08 })
    const { kept, tapAt, onPreview } = open({ tapLagMs: 80 })
    press('Play and tap')
    for (const sec of taps) tapAt(sec)
    press('Stop and look')
    expect(onPreview.mock.lastCall?.[0]?.anchors.length).toBeGreaterThan(80)
    press('Keep these bars')
    const map = createBarMap(kept.body)
    const errors = truth.map((sec, beat) => (map?.secAtBeats(beat) ?? Number.NaN) - sec)
    expect(rootMeanSquare(errors)).toBeLessThan(0.015)
    expect(onPreview.mock.lastCall?.[0]).toBeNull()
    // The form begins with bar 1 when nothing was marked before.
    expect(kept.body.marks).toEqual([{ bar: 1, formBar: 1, newPass: true }])
  })

  it('plays at half speed while tapping, gives the speed back, and takes the lag off in wall time', () => {
    const { truth, taps } = simulateTaps({ seed: 5, lagSec: 0.08, rate: 0.5, missed: 0, doubled: 0 })
    const { kept, tapAt, asked, player } = open({ tapLagMs: 80 })
    player.rate = 0.9
    fireEvent.click(screen.getByLabelText('half speed'))
    press('Play and tap')
    expect(player.rate).toBe(0.5)
    for (const sec of taps) tapAt(sec)
    press('Stop and look')
    expect(asked).toEqual(['rate 0.5', 'play', 'pause', 'rate 0.9'])
    press('Keep these bars')
    const map = createBarMap(kept.body)
    expect(rootMeanSquare(truth.map((sec, beat) => (map?.secAtBeats(beat) ?? NaN) - sec))).toBeLessThan(0.015)
  })

  it('counts taps, tells the tempo, and takes a wrong tap back while it plays', () => {
    const { tapAt, asked } = open()
    press('Play and tap')
    for (let beat = 0; beat < 8; beat += 1) tapAt(4 + beat * 0.5)
    tapAt(7.6)
    expect(screen.getByText(/^9$/)).toBeDefined()
    press('Take the last tap back')
    expect(screen.getByText(/^8$/)).toBeDefined()
    expect(screen.getByText(/^120$/)).toBeDefined()
    expect(asked).not.toContain('pause')
    fireEvent.keyDown(screen.getByRole('button', { name: 'Tap on every beat' }), { key: 'Backspace' })
    expect(screen.getByText(/^7$/)).toBeDefined()
  })

  it('takes taps from the pointer, from the space bar once however long it is held, and from assistive technology', async () => {
    const { player, user } = open()
    press('Play and tap')
    const pad = screen.getByRole('button', { name: 'Tap on every beat' })
    player.heardPosition = 1
    await user.click(pad)
    expect(screen.getByText('1', { selector: 'span' })).toBeDefined()
    player.heardPosition = 2
    fireEvent.keyDown(pad, { key: ' ' })
    fireEvent.keyDown(pad, { key: ' ', repeat: true })
    player.heardPosition = 3
    fireEvent.click(pad, { detail: 0 })
    expect(screen.getByText('3', { selector: 'span' })).toBeDefined()
  })

  it('says where taps start, and counts them anew when that is changed', async () => {
    const { kept, tapAt, user } = open()
    press('Play and tap')
    for (let beat = 0; beat < 16; beat += 1) tapAt(4 + beat * 0.5)
    press('Stop and look')
    const beat = screen.getByLabelText('beat of the first tap')
    await user.clear(beat)
    await user.type(beat, '4{Enter}')
    const bar = screen.getByLabelText('bar of the first tap')
    await user.clear(bar)
    await user.type(bar, '0{Enter}')
    press('Keep these bars')
    expect(lineSec(kept.body, 1)).toBeCloseTo(4.5, 3)
  })

  it('offers only what the meter has: no 1 and 3 in three', () => {
    open({ tune: waltz })
    const group = screen.getByRole('group', { name: 'Tap on' })
    expect(within(group).getAllByRole('radio')).toHaveLength(2)
  })

  it('knows the bars already there: taps within them continue their count and tell the lag', () => {
    const { tapAt, onTapLag, kept } = open({ body: steady })
    press('Play and tap')
    for (let beat = 0; beat < 16; beat += 1) tapAt(20.06 + beat * 0.5)
    press('Stop and look')
    press('Take that off my taps')
    expect(onTapLag).toHaveBeenCalledWith(60)
    press('Keep these bars')
    expect(lineSec(kept.body, 3)).toBeCloseTo(14, 6)
    expect(lineSec(kept.body, 20)).toBeCloseTo(48, 6)
  })

  it('says in a sentence why too few taps make no bars', () => {
    const { tapAt, onPreview } = open()
    press('Play and tap')
    tapAt(4)
    press('Stop and look')
    expect(screen.getByRole('alert').textContent).toContain('Two taps at least are needed.')
    expect(screen.getByRole('button', { name: 'Keep these bars' }).hasAttribute('disabled')).toBe(true)
    expect(onPreview).not.toHaveBeenCalled()
  })
})

describe('laying bars without tapping', () => {
  it('fills the take at a steady tempo from the playhead', async () => {
    const { kept, player, user } = open({ tune: waltz })
    player.heardPosition = 3
    await user.type(screen.getByLabelText('Beats a minute'), '90')
    press(/^Bar 1 is here/)
    expect(kept.body.meters).toEqual([{ bar: 1, meter: waltz.meter }])
    expect(lineSec(kept.body, 1)).toBeCloseTo(3, 9)
    expect(lineSec(kept.body, 11)).toBeCloseTo(23, 9)
  })

  it('refuses a tempo nobody plays', async () => {
    const { kept, user } = open({ tune: null })
    await user.type(screen.getByLabelText('Beats a minute'), '9000')
    press(/^Bar 1 is here/)
    expect(screen.getByRole('alert').textContent).toContain('from 20 to 400')
    expect(kept.body.anchors).toEqual([])
  })
})

describe('correcting lines without dragging', () => {
  const choose = async (user: ReturnType<typeof userEvent.setup>, tab: string, bar: number) => {
    await user.click(screen.getByRole('tab', { name: tab }))
    const field = screen.getByLabelText('chosen bar')
    await user.clear(field)
    await user.type(field, `${bar}{Enter}`)
  }

  it('puts a line at the playhead and nudges it', async () => {
    const { kept, player, user } = open({ body: steady })
    await choose(user, 'One line', 5)
    player.heardPosition = 18.2
    press('Put its line at the playhead')
    expect(lineSec(kept.body, 5)).toBeCloseTo(18.2, 9)
    press('10 ms earlier')
    expect(lineSec(kept.body, 5)).toBeCloseTo(18.19, 9)
    expect(lineSec(kept.body, 4)).toBeCloseTo(16, 9)
  })

  it('says why a line cannot be put past the next one, and changes nothing', async () => {
    const { kept, player, user } = open({ body: steady })
    await choose(user, 'One line', 5)
    player.heardPosition = 21
    press('Put its line at the playhead')
    expect(screen.getByRole('alert').textContent).toContain('Bar 5 cannot come after bar 6')
    expect(kept.body).toEqual(steady)
  })

  it('sets bar 1, the pick-up, the count, the meter, and bars more or less', async () => {
    const { kept, player, user } = open({ body: steady })
    await choose(user, 'Counting', 3)
    player.heardPosition = 14.02
    press('Bar 1 is at the playhead')
    expect(lineSec(kept.body, 1)).toBeCloseTo(14, 9)
    press('Add a bar at bar 3')
    expect(lineSec(kept.body, 4)).toBeCloseTo(18, 9)
    press('Take out bar 3')
    expect(lineSec(kept.body, 3)).toBeCloseTo(18, 9)
    press('1 is a beat later')
    expect(lineSec(kept.body, 1)).toBeCloseTo(14.5, 9)
    press('Half as many beats')
    expect(lineSec(kept.body, 2)).toBeCloseTo(18.5, 9)
    press('Twice as many beats')
    const meter = screen.getByLabelText('Meter from bar 3')
    await user.clear(meter)
    await user.type(meter, '3/4{Enter}')
    expect(kept.body.meters.map(({ meter: { upper } }) => upper)).toEqual([4, 3])
    expect(kept.body.meters.at(-1)?.bar).toBe(3)
    press('Clear all bars')
    expect(kept.body).toEqual(emptyBarMap)
  })

  it('marks where the form starts, goes on and stops, and takes a mark out', async () => {
    const { kept, user } = open({ body: steady })
    await choose(user, 'Form', 3)
    press('A chorus starts at bar 3')
    press('The next bar')
    press('Outside the form from bar 4')
    expect(kept.body.marks).toEqual([
      { bar: 3, formBar: 1, newPass: true },
      { bar: 4, formBar: null, newPass: false }
    ])
    press('Take out: from bar 4 on, outside the form')
    expect(kept.body.marks).toHaveLength(1)
  })

  it('undoes with the button and with Ctrl Z, but leaves Ctrl Z in a text field to the field', async () => {
    const { kept, user } = open({ body: steady })
    await choose(user, 'Counting', 3)
    press('Half as many beats')
    fireEvent.keyDown(screen.getByLabelText('Meter from bar 3'), { key: 'z', ctrlKey: true })
    expect(kept.body).not.toEqual(steady)
    fireEvent.keyDown(screen.getByRole('button', { name: 'Clear all bars' }), { key: 'z', ctrlKey: true })
    await screen.findByText(/20 bars|55 bars/)
    expect(kept.body).toEqual(steady)
  })
})
