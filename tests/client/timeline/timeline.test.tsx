import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { liveScopes } from '@client/lib/scope'
import { FormStrip } from '@client/timeline/form-strip'
import { Timeline, type TimelineProps } from '@client/timeline/timeline'
import { createBarMap } from '@shared/timing/bar-map'
import { formRows } from '@shared/timing/form-rows'
import { createStillPlayer, furnishPage, type StillPlayer } from './still-player'

// Wavesurfer draws on canvases, which jsdom has not: it is looked at in Chromium.
vi.mock('wavesurfer.js', () => ({
  default: {
    create: () => ({
      on: () => () => {},
      destroy: () => {},
      getRenderer: () => ({}),
      getWrapper: () => document.createElement('div')
    })
  }
}))

/** 20 bars of 4/4, two seconds each: bar n starts at 2 (n - 1). */
const barMap = createBarMap({
  anchors: [
    { id: 'a', sec: 0, position: { bar: 1, beat: { n: 1, d: 1 } } },
    { id: 'b', sec: 40, position: { bar: 21, beat: { n: 1, d: 1 } } }
  ],
  meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
  marks: []
})
if (!barMap) throw new Error('the bar map is sound')

let player: StillPlayer
const comment = {
  id: 'c1',
  letter: 'b',
  label: 'question by Mara, bars 3 to 4',
  isOpen: true,
  span: { startSec: 4, endSec: 8 }
}

const build = (more: Partial<TimelineProps> = {}): TimelineProps => ({
  player,
  durationSec: 40,
  peaks: null,
  barMap,
  spans: [comment],
  selection: null,
  onSelect: () => {},
  snap: 'bar',
  onSnap: () => {},
  isFollowing: true,
  onFollow: () => {},
  valueText: (sec) => `${sec} seconds`,
  ...more
})

beforeAll(furnishPage)
beforeEach(() => {
  player = createStillPlayer(40)
})
afterEach(cleanup)

/** 1000 px for 40 s: 25 px a second. */
const at = (sec: number) => ({ clientX: sec * 25, button: 0, pointerId: 1, buttons: 1 })

describe('the sound lane', () => {
  it('goes where it is clicked', () => {
    render(<Timeline {...build()} />)
    const sound = screen.getByTestId('sound')
    fireEvent.pointerDown(sound, at(7.3))
    fireEvent.pointerUp(sound, at(7.3))
    expect(player.seeks[0]).toBeCloseTo(7.3)
  })

  it('selects whole bars by a drag when it snaps to bars', () => {
    const onSelect = vi.fn()
    render(<Timeline {...build({ onSelect })} />)
    const sound = screen.getByTestId('sound')
    fireEvent.pointerDown(sound, at(4.3))
    fireEvent.pointerMove(sound, at(9.8))
    fireEvent.pointerUp(sound, at(9.8))
    expect(onSelect).toHaveBeenCalledExactlyOnceWith({ startSec: 4, endSec: 10 })
    expect(player.seeks).toEqual([])
  })

  // WCAG 2.2, 2.5.7 Dragging Movements.
  it('selects by two clicks without a drag', async () => {
    const onSelect = vi.fn()
    render(<Timeline {...build({ onSelect })} />)
    await userEvent.click(screen.getByText('Mark with two clicks'))
    const sound = screen.getByTestId('sound')
    for (const sec of [12.1, 15.9]) {
      fireEvent.pointerDown(sound, at(sec))
      fireEvent.pointerUp(sound, at(sec))
    }
    expect(onSelect).toHaveBeenCalledExactlyOnceWith({ startSec: 12, endSec: 16 })
    expect(player.seeks).toEqual([])
  })

  it('asks the session to seek when the transport is shared', () => {
    const onSeek = vi.fn()
    render(<Timeline {...build({ onSeek })} />)
    fireEvent.pointerDown(screen.getByTestId('sound'), at(5))
    fireEvent.pointerUp(screen.getByTestId('sound'), at(5))
    expect(onSeek).toHaveBeenCalledOnce()
    expect(player.seeks).toEqual([])
  })
})

describe('the plumb line', () => {
  it('is a slider that says its place in words and moves by beats and bars', async () => {
    render(<Timeline {...build()} />)
    const line = screen.getByRole('slider', { name: 'Place in the take' })
    line.focus()
    await userEvent.keyboard('{ArrowRight}{ArrowRight}{PageUp}{Home}{End}')
    expect(player.seeks).toEqual([0.5, 1, 2, 0, 40])
    expect(line.getAttribute('aria-valuetext')).toBe('40 seconds')
  })

  it('draws the selection along with Shift', async () => {
    const onSelect = vi.fn()
    render(<Timeline {...build({ onSelect })} />)
    screen.getByRole('slider', { name: 'Place in the take' }).focus()
    await userEvent.keyboard('{Shift>}{PageUp}{/Shift}')
    expect(onSelect).toHaveBeenCalledWith({ startSec: 0, endSec: 2 })
  })

  it('hangs two lines when a person has stepped away, with the name on the session’s', () => {
    const lines = [
      { kind: 'own' as const, positionSec: () => 3 },
      { kind: 'session' as const, positionSec: () => 9, label: 'Mara' }
    ]
    const { container } = render(<Timeline {...build({ lines })} />)
    expect(container.querySelectorAll('[data-line]')).toHaveLength(2)
    expect(container.querySelector('[data-line="session"]')?.textContent).toBe('Mara')
    expect(screen.getAllByRole('slider', { name: 'Place in the take' })).toHaveLength(1)
  })
})

describe('comment spans', () => {
  it('are buttons named by letter and place', async () => {
    const onSelectSpan = vi.fn()
    render(<Timeline {...build({ onSelectSpan })} />)
    await userEvent.click(screen.getByRole('button', { name: 'b: question by Mara, bars 3 to 4' }))
    expect(onSelectSpan).toHaveBeenCalledWith('c1')
  })

  it('move their edges by keys and by buttons', async () => {
    const onMoveSpan = vi.fn()
    render(<Timeline {...build({ selectedSpanId: 'c1', onMoveSpan })} />)
    screen.getByRole('slider', { name: 'Comment b, end' }).focus()
    await userEvent.keyboard('{ArrowRight}')
    await userEvent.click(screen.getByRole('button', { name: 'Comment b start earlier' }))
    expect(onMoveSpan.mock.calls).toEqual([
      ['c1', { startSec: 4, endSec: 10 }],
      ['c1', { startSec: 2, endSec: 8 }]
    ])
  })

  it('exist only in and near the view', () => {
    const spans = Array.from({ length: 500 }, (_, n) => ({
      ...comment,
      id: `c${n}`,
      span: { startSec: n * 7, endSec: n * 7 + 3 }
    }))
    const { container } = render(<Timeline {...build({ spans, durationSec: 3600 })} />)
    const nearer = screen.getByTitle('Look nearer')
    for (let n = 0; n < 6; n += 1) fireEvent.click(nearer)
    expect(container.querySelectorAll('[data-span]').length).toBeLessThan(60)
  })
})

describe('bar lines', () => {
  it('are nudged by keys and by buttons when they may be moved', async () => {
    const onMoveBar = vi.fn()
    render(<Timeline {...build({ editBars: true, onMoveBar })} />)
    screen.getByRole('slider', { name: 'Line of bar 1' }).focus()
    await userEvent.keyboard('{PageDown}{ArrowRight}')
    await userEvent.click(screen.getByRole('button', { name: /Line of bar 2\s+earlier/ }))
    expect(onMoveBar.mock.calls.map(([bar]) => bar)).toEqual([2, 2])
    expect(onMoveBar.mock.calls[0]?.[1]).toBeCloseTo(2.01)
    expect(onMoveBar.mock.calls[1]?.[1]).toBeCloseTo(1.99)
  })
})

describe('the form strip', () => {
  const rows = formRows({
    marks: [{ bar: 1, formBar: 1, newPass: true }],
    formLength: 8,
    cyclic: true,
    sections: [],
    firstBar: 1,
    lastBar: 20
  })
  const strip = (onSelect = vi.fn()) => (
    <FormStrip
      player={player}
      barMap={barMap}
      rows={rows}
      sections={[]}
      isCyclic
      peaks={null}
      commentsOf={(bar) => ({ open: bar === 3 ? 1 : 0, settled: bar === 3 ? 1 : 0 })}
      barName={(bar) => `bar ${bar}`}
      selection={null}
      onSelect={onSelect}
    />
  )

  it('says bar, comments and where the line is', () => {
    render(strip())
    expect(screen.getByRole('gridcell', { name: 'bar 3, 2 comments, 1 open' })).toBeTruthy()
    expect(screen.getByRole('gridcell', { name: 'bar 1, the line is here' })).toBeTruthy()
  })

  it('has one tab stop, moves by arrows, goes there on Enter and selects with Shift', async () => {
    const onSelect = vi.fn()
    render(strip(onSelect))
    expect(screen.getAllByRole('gridcell').filter((cell) => cell.tabIndex === 0)).toHaveLength(1)
    screen.getByRole('gridcell', { name: /^bar 1,/ }).focus()
    await userEvent.keyboard('{ArrowDown}{ArrowRight}{Enter}')
    expect(player.seeks).toEqual([18])
    await userEvent.keyboard('{Shift>}{ArrowRight}{/Shift}')
    expect(onSelect).toHaveBeenLastCalledWith({ startSec: 18, endSec: 22 })
  })
})

describe('leaving the desk', () => {
  it('leaves no listener, timer or frame behind after fifty visits', () => {
    const before = liveScopes()
    for (let visit = 0; visit < 50; visit += 1) {
      const { unmount } = render(<Timeline {...build({ selectedSpanId: 'c1', onMoveSpan: () => {} })} />)
      unmount()
    }
    expect(liveScopes()).toBe(before)
  }, 30_000)
})
