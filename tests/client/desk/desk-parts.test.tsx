import { cleanup, fireEvent, render, screen, within } from '@testing-library/react'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { BarsTable } from '@client/app/desk/bars-table'
import { deskModel } from '@client/app/desk/desk-model'
import { PanelBoundary } from '@client/app/desk/panel-boundary'
import { SelectionLine } from '@client/app/desk/selection-line'
import { soloControls } from '@client/transport/controls'
import { rational } from '@shared/timing/rational'
import { buildComment } from '../comments/build-comment'
import { createStillPlayer } from '../timeline/still-player'
import { standInForLayers } from '../ui/layers-stand-in'

beforeEach(standInForLayers)
afterEach(cleanup)

/** Bars of two seconds from 0 on, in a form of two bars. */
const model = deskModel({
  durationSec: 8,
  bars: {
    anchors: [1, 2].map((bar) => ({ id: `a${bar}`, sec: (bar - 1) * 2, position: { bar, beat: rational(1) } })),
    meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
    marks: [{ bar: 1, formBar: 1, newPass: true }]
  },
  chart: {
    key: '',
    meter: '4/4',
    tempo: null,
    cyclic: true,
    sections: [{ id: 'a', name: 'A', bars: ['Dm7', 'G7'] }],
    order: ['a']
  }
})

describe('BarsTable', () => {
  it('says every bar with time, section, chords and what was said about it (WCAG 2.2, 1.2.1)', () => {
    const comment = buildComment({ startSec: 6.5, text: 'Late here.' })
    const onGoTo = vi.fn()
    render(
      <BarsTable
        title="A take"
        model={model}
        comments={[comment]}
        letters={new Map([[comment.id, 'a']])}
        onGoTo={onGoTo}
        onClose={() => {}}
      />
    )
    const rows = screen.getAllByRole('row', { hidden: true }).slice(1)
    expect(rows.map((row) => row.textContent)).toEqual([
      'bar 1, 1st chorus0:00.0A sectionDm7',
      'bar 2, 1st chorus0:02.0A sectionG7',
      'bar 1, 2nd chorus0:04.0A sectionDm7',
      'bar 2, 2nd chorus0:06.0A sectionG7a Late here.'
    ])
    fireEvent.click(within(rows[2] as HTMLElement).getByRole('button', { hidden: true }))
    expect(onGoTo).toHaveBeenCalledWith(4)
  })
})

describe('SelectionLine', () => {
  it('says the selection in words and hands out its address', () => {
    const onCopy = vi.fn()
    render(<SelectionLine model={model} selection={{ startSec: 4, endSec: 8 }} onCopy={onCopy} />)
    expect(screen.getByText(/bars 1 to 2/).textContent).toBe('bars 1 to 2 · A section, 2nd chorus · over Dm7 and G7')
    fireEvent.click(screen.getByRole('button', { name: 'Copy its address' }))
    expect(onCopy).toHaveBeenCalledOnce()
  })
})

describe('PanelBoundary', () => {
  it('keeps a broken panel to itself and shows it again when asked', () => {
    const quiet = vi.spyOn(console, 'error').mockImplementation(() => {})
    let isBroken = true
    const Fragile = () => {
      if (isBroken) throw new Error('broken')
      return <p>whole</p>
    }
    render(
      <>
        <PanelBoundary name="the comments">
          <Fragile />
        </PanelBoundary>
        <p>the sound</p>
      </>
    )
    expect(screen.getByRole('alert').textContent).toContain('Something went wrong with the comments')
    expect(screen.getByText('the sound')).toBeTruthy()
    isBroken = false
    fireEvent.click(screen.getByRole('button', { name: 'Show it again' }))
    expect(screen.getByText('whole')).toBeTruthy()
    quiet.mockRestore()
  })
})

describe('soloControls', () => {
  it('go straight to the player', () => {
    const player = createStillPlayer(60)
    const setLoop = vi.spyOn(player, 'setLoop')
    const controls = soloControls(player)
    controls.seek(12)
    controls.setLoop({ startSec: 1, endSec: 2 })
    controls.setLoop(null)
    expect(player.heardPosition).toBe(12)
    expect(setLoop.mock.calls).toEqual([[{ span: { startSec: 1, endSec: 2 } }], [null]])
  })
})
