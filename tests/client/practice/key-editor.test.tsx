import { cleanup, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { KeyEditor } from '@client/features/practice/key-editor'
import { choicesOf, defaultKeyMap, useTransportKeys, type KeyActions } from '@client/transport/keys'

afterEach(cleanup)

/** The editor over a desk that listens with the same map. */
function Desk({ spy }: { spy: (name: string) => void }) {
  const [map, setMap] = useState(defaultKeyMap)
  const actions: KeyActions = Object.fromEntries(defaultKeyMap.map(({ action }) => [action, () => spy(action)]))
  useTransportKeys(actions, { map })
  return (
    <>
      <KeyEditor map={map} onMap={setMap} />
      <pre data-testid="choices">{JSON.stringify(choicesOf(map))}</pre>
      <textarea aria-label="words" />
    </>
  )
}
const open = async () => {
  const spy = vi.fn()
  const user = userEvent.setup()
  render(<Desk spy={spy} />)
  await user.click(screen.getByRole('button', { name: 'Change keys' }))
  const choices = (): object => JSON.parse(screen.getByTestId('choices').textContent)
  const ask = (label: string) => user.click(screen.getByRole('button', { name: `New key for “${label}”` }))
  return { user, spy, choices, ask, said: () => screen.getByRole('status').textContent }
}

describe('KeyEditor', () => {
  it('gives the key that is pressed next, without doing what it did before', async () => {
    const { user, spy, choices, ask, said } = await open()
    await ask('Low focus on or off')
    expect(said()).toContain('Press the new key for “Low focus on or off”')
    await user.keyboard('f')
    expect(spy).not.toHaveBeenCalled()
    expect(choices()).toEqual({ lowFocus: ['b', 'f'], follow: [] })
    expect(said()).toBe(
      'F is now “Low focus on or off”. “Follow the line, or stop following” loses it and has no key any more.'
    )
    await user.keyboard('f')
    expect(spy.mock.calls.flat()).toEqual(['lowFocus'])
  })

  it('takes what a pedal sends, with the keys held for it, and says what the loser keeps', async () => {
    const { user, choices, ask, said } = await open()
    await ask('Again from two bars before')
    await user.keyboard('{PageUp}')
    expect(said()).toContain('“Back a bar” loses it and keeps ←.')
    await ask('Tap the tempo')
    await user.keyboard('{Control>}{Shift>}{ArrowDown}{/Shift}{/Control}')
    expect(choices()).toMatchObject({ againBefore: ['a', 'PageUp'], tapTempo: ['t', 'Mod+Shift+ArrowDown'] })
  })

  it('leaves the browser its keys, and goes away by Esc or Tab with nothing changed', async () => {
    const { user, choices, ask, said } = await open()
    await ask('Tap the tempo')
    await user.keyboard('{Control>}w{/Control}')
    expect(said()).toContain('Ctrl W belongs to the browser.')
    await user.keyboard('{Escape}')
    await ask('Tap the tempo')
    await user.tab()
    await user.keyboard('x')
    expect(choices()).toEqual({})
    expect(screen.queryByText(/Press the new key/)).toBeNull()
  })

  it('takes a key away, keeps the focus in its row, and brings it back', async () => {
    const { user, spy, choices, said } = await open()
    await user.click(screen.getByRole('button', { name: 'Take T from “Tap the tempo”' }))
    expect([choices(), said()]).toEqual([{ tapTempo: [] }, 'T is free. “Tap the tempo” has no key any more.'])
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'New key for “Tap the tempo”' }))
    await user.keyboard('t')
    expect(spy).not.toHaveBeenCalled()
    await user.click(screen.getByRole('button', { name: 'Undo' }))
    expect(choices()).toEqual({})
  })

  it('goes back to the first keys in one step, and that can be undone', async () => {
    const { user, choices, ask } = await open()
    expect(screen.queryByRole('button', { name: 'Back to the first keys' })).toBeNull()
    await ask('Play or pause')
    await user.keyboard('p')
    await user.click(screen.getByRole('button', { name: 'Back to the first keys' }))
    expect(choices()).toEqual({})
    await user.click(screen.getByRole('button', { name: 'Undo' }))
    expect(choices()).toEqual({ playPause: ['Space', 'PageDown', 'p'] })
  })

  it('never fires while somebody writes, whatever was given', async () => {
    const { user, spy, ask } = await open()
    await ask('Play or pause')
    await user.keyboard('p')
    await user.click(screen.getByLabelText('words'))
    await user.keyboard('apply p')
    expect(spy).not.toHaveBeenCalled()
  })

  it('has a row for every action', async () => {
    await open()
    const rows = within(screen.getByRole('list', { name: 'Actions and their keys' })).getAllByRole('listitem')
    expect(rows).toHaveLength(defaultKeyMap.length)
  })
})
