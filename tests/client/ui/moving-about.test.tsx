import { cleanup, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, describe, expect, it } from 'vitest'
import { IconButton } from '@client/ui/icon-button'
import { Slider } from '@client/ui/slider'
import { Tabs } from '@client/ui/tabs'
import { Toolbar } from '@client/ui/toolbar'

afterEach(cleanup)

const focusedName = () => document.activeElement?.getAttribute('aria-label') ?? document.activeElement?.textContent

describe('Tabs', () => {
  function Margin() {
    const [chosen, setChosen] = useState<'a' | 'b' | 'c'>('a')
    const tab = <K extends string>(key: K, label: string) => ({ key, label, panel: <p>{label} panel</p> })
    return (
      <Tabs
        label="Margin"
        chosen={chosen}
        onChoose={setChosen}
        tabs={[tab('a', 'Comments'), tab('b', 'Implied changes'), tab('c', 'People')]}
      />
    )
  }

  it('is one tab stop, moved by arrows, Home and End, and shows the panel of the chosen tab', async () => {
    const user = userEvent.setup()
    render(<Margin />)
    await user.tab()
    expect(focusedName()).toBe('Comments')
    await user.keyboard('{ArrowLeft}')
    expect(focusedName()).toBe('People')
    expect(screen.getByRole('tabpanel', { name: 'People' }).textContent).toBe('People panel')
    await user.keyboard('{Home}{ArrowRight}')
    expect(screen.getByRole('tab', { selected: true }).textContent).toBe('Implied changes')
    await user.tab()
    expect(document.activeElement).toBe(screen.getByRole('tabpanel'))
  })
})

describe('Toolbar', () => {
  function Transport({ canUndo = true }: { canUndo?: boolean }) {
    const [speed, setSpeed] = useState(60)
    return (
      <Toolbar label="Transport">
        <IconButton icon="play" label="Play" />
        <IconButton icon="undo" label="Undo" disabled={!canUndo} />
        <IconButton icon="loop" label="Loop" />
        <Slider label="Speed" says={`${speed} %`} value={speed} min={20} max={150} onChange={setSpeed} />
      </Toolbar>
    )
  }

  it('is one stop for its buttons and remembers the place', async () => {
    const user = userEvent.setup()
    render(<Transport />)
    await user.tab()
    expect(focusedName()).toBe('Play')
    await user.keyboard('{ArrowRight}{ArrowRight}')
    expect(focusedName()).toBe('Loop')
    await user.tab()
    expect(document.activeElement).toBe(screen.getByRole('slider'))
    await user.tab({ shift: true })
    expect(focusedName()).toBe('Loop')
  })

  it('walks past a slider to the buttons behind it', async () => {
    const user = userEvent.setup()
    render(
      <Toolbar label="Transport">
        <IconButton icon="play" label="Play" />
        <Slider label="Speed" says="60 %" value={60} min={20} max={150} onChange={() => {}} />
        <IconButton icon="loop" label="Loop" />
      </Toolbar>
    )
    await user.tab()
    await user.keyboard('{ArrowRight}')
    expect(focusedName()).toBe('Loop')
    await user.keyboard('{ArrowRight}')
    expect(focusedName()).toBe('Play')
  })

  it('passes over a disabled button and keeps a stop when the one that held it is disabled', async () => {
    const user = userEvent.setup()
    const { rerender } = render(<Transport canUndo={false} />)
    await user.tab()
    await user.keyboard('{ArrowRight}')
    expect(focusedName()).toBe('Loop')
    rerender(<Transport />)
    screen.getByRole('button', { name: 'Undo' }).focus()
    rerender(<Transport canUndo={false} />)
    // The toolbar hears of the change in a microtask.
    await Promise.resolve()
    const stops = screen.getAllByRole('button').filter((b) => !b.hasAttribute('disabled') && b.tabIndex === 0)
    expect(stops).toHaveLength(1)
  })

  it('leaves a slider its arrows, and gives it big steps by page keys with words for the value', async () => {
    const user = userEvent.setup()
    render(<Transport />)
    const slider = screen.getByRole('slider', { name: 'Speed' })
    slider.focus()
    await user.keyboard('{ArrowLeft}')
    expect(document.activeElement).toBe(slider)
    await user.keyboard('{PageUp}')
    expect(slider.getAttribute('aria-valuetext')).toBe('70 %')
    await user.keyboard('{PageDown}{PageDown}{PageDown}{PageDown}{PageDown}{PageDown}')
    expect(slider.getAttribute('aria-valuetext')).toBe('20 %')
  })
})
