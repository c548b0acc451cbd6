import { cleanup, fireEvent, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Tune } from '@shared/contracts/tunes'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartBody } from '@shared/music/types'
import { TunePage } from '@client/features/tunes/tune-page'
import type { LiveChart } from '@client/features/tunes/use-chart'
import { standInForLayers } from '../ui/layers-stand-in'
import { fourAndFour, useKeptChart } from './kept-chart'

// Finding by role walks the whole sheet each time.
vi.setConfig({ testTimeout: 30_000 })
beforeEach(standInForLayers)
afterEach(cleanup)

const tune: Tune = {
  id: '11111111-1111-4111-8111-111111111111',
  groupId: '22222222-2222-4222-8222-222222222222',
  title: 'Slack Tide',
  createdBy: null,
  createdAt: '2026-11-24T10:00:00Z',
  takeCount: 0,
  chart: fourAndFour,
  chartRevision: 1,
  abilities: ['tune:read', 'tune:edit']
}

const open = (body: ChartBody = fourAndFour, part: Partial<LiveChart> = {}, abilities = tune.abilities) => {
  const kept: { body: ChartBody } = { body }
  function Host() {
    const document = useKeptChart(body, (now) => {
      kept.body = now
    })
    return <TunePage tune={{ ...tune, abilities }} document={{ ...document, ...part }} />
  }
  render(<Host />)
  return { kept, user: userEvent.setup() }
}

const bar = (name: string) => screen.getByRole('button', { name: new RegExp(`^${name}:`) })

describe('the chart set as a sheet', () => {
  it('lays out the played form with the words of every bar, repeated chords carried', () => {
    open()
    expect(screen.getAllByRole('heading', { level: 3 }).map((heading) => heading.textContent)).toEqual([
      'A',
      'A',
      'B',
      'A'
    ])
    expect(bar('Bar 2 of 2nd A').getAttribute('aria-label')).toBe('Bar 2 of 2nd A: G minor seventh')
    expect(bar('Bar 4 of B').getAttribute('aria-label')).toBe('Bar 4 of B: no chord')
  })

  it('shows the chart for E♭ instruments: a major sixth up, G minor as E minor', async () => {
    const { user } = open()
    await user.selectOptions(screen.getByLabelText('written for'), 'E♭')
    expect(bar('Bar 1 of 1st A').getAttribute('aria-label')).toBe('Bar 1 of 1st A: E minor seventh')
    expect(screen.getByText(/in E minor/)).toBeDefined()
  })

  it('gives a reader the sheet without anything to edit', () => {
    open(fourAndFour, {}, ['tune:read'])
    expect(screen.queryByRole('button', { name: /^Bar 1/ })).toBeNull()
    expect(screen.queryByRole('button', { name: 'Write it as text' })).toBeNull()
    expect(screen.getAllByRole('img', { name: 'G minor seventh' }).length).toBeGreaterThan(0)
  })
})

describe('a bar clicked', () => {
  it('is typed where it stands; Enter keeps it and goes to the next bar', async () => {
    const { kept, user } = open()
    await user.click(bar('Bar 1 of 1st A'))
    const field = screen.getByRole('textbox', { name: 'Bar 1 of 1st A' })
    await user.clear(field)
    await user.type(field, 'Gm6 C9{Enter}')
    expect(kept.body.sections[0]?.bars[0]).toBe('Gm6 C9')
    expect(document.activeElement).toBe(screen.getByRole('textbox', { name: 'Bar 2 of 1st A' }))
    await user.keyboard('{Escape}')
    expect(document.activeElement).toBe(bar('Bar 2 of 1st A'))
    // What changes in A changes wherever A is played.
    expect(bar('Bar 1 of 3rd A').getAttribute('aria-label')).toContain('G minor sixth, then C ninth')
  })

  it('keeps a bar that cannot be read in the field, with the reason beside it', async () => {
    const { kept, user } = open()
    await user.click(bar('Bar 3 of B'))
    const field = screen.getByRole('textbox', { name: 'Bar 3 of B' })
    await user.clear(field)
    await user.type(field, 'Hx7{Tab}')
    expect(screen.getByRole('alert').textContent).toContain('Bar 3 of B')
    expect(screen.getByRole<HTMLInputElement>('textbox', { name: 'Bar 3 of B' }).value).toBe('Hx7')
    expect(kept.body).toEqual(fourAndFour)
    await user.keyboard('{Escape}')
    expect(bar('Bar 3 of B').getAttribute('aria-label')).toContain('B flat major seventh')
  })

  it('moves between bars with arrows, and takes one out with Delete', async () => {
    const { kept } = open()
    const first = bar('Bar 1 of 1st A')
    first.focus()
    fireEvent.keyDown(first, { key: 'ArrowRight' })
    const second = bar('Bar 2 of 1st A')
    expect(document.activeElement).toBe(second)
    fireEvent.keyDown(second, { key: 'Delete' })
    expect(kept.body.sections[0]?.bars).toEqual(['Gm7', 'Am7b5 D7', 'Gm7'])
  })

  it('can have a bar put before and after it', async () => {
    const { kept, user } = open()
    bar('Bar 1 of B').focus()
    await user.click(await screen.findByRole('button', { name: 'A bar after it' }))
    expect(kept.body.sections[1]?.bars).toEqual(['Cm7', '%', 'F7', 'Bbmaj7', 'N.C.'])
  })

  it('comes back with undo, by button and by Ctrl Z', async () => {
    const { kept, user } = open()
    bar('Bar 1 of B').focus()
    await user.click(await screen.findByRole('button', { name: 'Take it out' }))
    await user.click(screen.getByRole('button', { name: 'Undo the last change of the chart' }))
    expect(kept.body).toEqual(fourAndFour)
    fireEvent.keyDown(bar('Bar 1 of B'), { key: 'Delete' })
    expect(kept.body).not.toEqual(fourAndFour)
    fireEvent.keyDown(bar('Bar 1 of B'), { key: 'z', ctrlKey: true })
    await screen.findByRole('button', { name: 'Bar 4 of B: no chord' })
    expect(kept.body).toEqual(fourAndFour)
  })
})

describe('the chart as text', () => {
  it('names the faulty bar at once, keeps the text, and cannot be kept until it can be read', async () => {
    const { kept, user } = open()
    await user.click(screen.getByRole('button', { name: 'Write it as text' }))
    const area = screen.getByLabelText<HTMLTextAreaElement>('The whole chart')
    fireEvent.change(area, { target: { value: '[A]\n| Gm7 | % | Hx7 | D7 |' } })
    const faults = screen.getByRole('list', { name: 'Bars that cannot be read' })
    expect(within(faults).getAllByRole('listitem')).toHaveLength(1)
    expect(faults.textContent).toContain('Bar 3:')
    expect(area.value).toContain('Hx7')
    expect(screen.getByRole('button', { name: 'Keep this chart' }).hasAttribute('disabled')).toBe(true)
    fireEvent.change(area, { target: { value: '[A]\n| Gm7 | % | Eb7 | D7 |\n[B]\n| Cm7 | % |' } })
    await user.click(screen.getByRole('button', { name: 'Keep this chart' }))
    expect(kept.body.sections.map(({ id, bars }) => [id, bars])).toEqual([
      ['a', ['Gm7', '%', 'Eb7', 'D7']],
      ['b', ['Cm7', '%']]
    ])
    expect(kept.body.order).toEqual(['a', 'a', 'b', 'a'])
  })

  it('writes one section alone', async () => {
    const { kept, user } = open()
    await user.click(screen.getByRole('button', { name: 'Write B as text' }))
    fireEvent.change(screen.getByLabelText('Bars of B'), { target: { value: '| C7 | F7 |' } })
    await user.click(screen.getByRole('button', { name: 'Keep these bars' }))
    expect(kept.body.sections[1]?.bars).toEqual(['C7', 'F7'])
  })

  it('begins an empty chart', async () => {
    const { kept, user } = open(chartDocument.empty)
    await user.click(screen.getByRole('button', { name: 'Write the chart' }))
    fireEvent.change(screen.getByLabelText('The whole chart'), { target: { value: '| Dm7 | Em7b5 A7 | % | N.C. |' } })
    await user.click(screen.getByRole('button', { name: 'Keep this chart' }))
    expect(kept.body.sections.map(({ name, bars }) => [name, bars.length])).toEqual([['A', 4]])
    expect(kept.body.order).toEqual([kept.body.sections[0]?.id])
  })
})

describe('key, meter and tempo', () => {
  it('keeps any key as typed and refuses what is none, with the text left', async () => {
    const { kept, user } = open()
    const key = screen.getByLabelText<HTMLInputElement>('Key')
    await user.clear(key)
    await user.type(key, 'D dorian{Enter}')
    expect(kept.body.key).toBe('D dorian')
    await user.clear(key)
    await user.type(key, 'H moll{Enter}')
    expect(key.getAttribute('aria-invalid')).toBe('true')
    expect(key.value).toBe('H moll')
    expect(kept.body.key).toBe('D dorian')
  })

  it('names the bar that stands in the way of another meter', async () => {
    const { kept, user } = open({
      ...fourAndFour,
      sections: [{ id: 'a', name: 'A', bars: ['Gm7 / / C7'] }],
      order: ['a']
    })
    const meter = screen.getByLabelText<HTMLInputElement>('Meter')
    await user.clear(meter)
    await user.type(meter, '3/4{Enter}')
    expect(meter.getAttribute('aria-invalid')).toBe('true')
    expect(screen.getByText(/Bar 1 of A/)).toBeDefined()
    expect(kept.body.meter).toBe('4/4')
  })

  it.each([
    ['132', { min: 132, max: 132 }],
    ['90-140', { min: 90, max: 140 }],
    ['90 to 140', { min: 90, max: 140 }]
  ])('reads the tempo %s', async (text, tempo) => {
    const { kept, user } = open()
    const field = screen.getByLabelText('Beats a minute')
    await user.clear(field)
    await user.type(field, `${text}{Enter}`)
    expect(kept.body.tempo).toEqual(tempo)
  })
})

describe('the form', () => {
  it('moves, repeats, takes out and adds sections by buttons', async () => {
    const { kept, user } = open()
    await user.click(screen.getByRole('button', { name: 'B, 3 of 4' }))
    await user.click(screen.getByRole('button', { name: 'Move B later' }))
    expect(kept.body.order).toEqual(['a', 'a', 'a', 'b'])
    await user.click(screen.getByRole('button', { name: 'Play it once more' }))
    expect(kept.body.order).toEqual(['a', 'a', 'a', 'b', 'b'])
    await user.click(screen.getByRole('button', { name: 'Take it out here' }))
    expect(kept.body.order).toEqual(['a', 'a', 'a', 'b'])
    await user.click(screen.getByRole('button', { name: 'A new section' }))
    expect(kept.body.sections.at(-1)?.name).toBe('C')
    expect(kept.body.order).toHaveLength(5)
  })

  it('moves and takes out from the keyboard, the focus staying with the section', async () => {
    const { kept } = open()
    const bridge = screen.getByRole('button', { name: 'B, 3 of 4' })
    bridge.focus()
    fireEvent.keyDown(bridge, { key: 'ArrowLeft', altKey: true })
    expect(kept.body.order).toEqual(['a', 'b', 'a', 'a'])
    await Promise.resolve()
    expect(document.activeElement?.getAttribute('aria-label')).toBe('B, 2 of 4')
    fireEvent.keyDown(document.activeElement as Element, { key: 'Delete' })
    expect(kept.body.order).toEqual(['a', 'a', 'a'])
  })

  it('says how it goes on, in a sentence that can be changed', async () => {
    const { kept, user } = open()
    await user.selectOptions(screen.getByLabelText('how the form goes on'), 'once')
    expect(kept.body.cyclic).toBe(false)
  })

  it('renames a section', async () => {
    const { kept, user } = open()
    const name = screen.getByLabelText('Name of section B')
    await user.clear(name)
    await user.type(name, 'Bridge{Enter}')
    expect(kept.body.sections[1]?.name).toBe('Bridge')
  })
})

describe('an edit that somebody else got in the way of', () => {
  it('shows both sides and can be put in after all', async () => {
    const { kept, user } = open(fourAndFour, {
      refused: {
        edit: { id: 'x', operations: [{ kind: 'setBar', sectionId: 'b', index: 1, text: 'F9' }] },
        message: 'Somebody else changed the same part.',
        isConflict: true
      }
    })
    expect(screen.getByText('You wrote “F9”. It now says “F7”.')).toBeDefined()
    await user.click(screen.getByRole('button', { name: 'Put mine in after all' }))
    expect(kept.body.sections[1]?.bars[1]).toBe('F9')
  })
})
