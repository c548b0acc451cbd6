import { cleanup, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import fc from 'fast-check'
import { afterEach, describe, expect, it, vi } from 'vitest'
import {
  actionFor,
  choicesOf,
  defaultKeyMap,
  keyMapFrom,
  keyName,
  rebind,
  shownKey,
  useTransportKeys,
  type KeyOptions
} from '@client/transport/keys'
import { keyActions } from '@shared/practice/key-actions'
import { KeyChoices } from '@shared/practice/preferences'

afterEach(cleanup)

const pressed = (key: string, more: Partial<KeyboardEvent> = {}) => ({
  key,
  code: '',
  shiftKey: false,
  ctrlKey: false,
  metaKey: false,
  altKey: false,
  ...more
})

describe('the key map', () => {
  it('gives no key to two actions', () => {
    const keys = defaultKeyMap.flatMap((binding) => binding.keys)
    expect(new Set(keys).size).toBe(keys.length)
  })

  it('reads keys whatever keyboard they come from', () => {
    expect(keyName(pressed(' '))).toBe('Space')
    expect(keyName(pressed('?', { shiftKey: true }))).toBe('?')
    expect(keyName(pressed('Z', { metaKey: true, shiftKey: true }))).toBe('Mod+Shift+z')
    expect(keyName(pressed('L'))).toBe('l')
    expect(actionFor(defaultKeyMap, pressed('ArrowLeft', { shiftKey: true }))).toBe('backBeat')
    expect(actionFor(defaultKeyMap, pressed('q'))).toBeNull()
  })

  it('takes a key away from its old action when it is given to another', () => {
    const map = rebind(defaultKeyMap, 'loop', ['Space'])
    expect(actionFor(map, pressed(' '))).toBe('loop')
    expect(actionFor(map, pressed('PageDown'))).toBe('playPause')
    expect(actionFor(map, pressed('l'))).toBeNull()
  })

  it('has every action once', () => {
    expect(defaultKeyMap.map(({ action }) => action).sort()).toEqual([...keyActions].sort())
  })

  it('reads a sign typed with AltGr as that sign', () => {
    const altGr = { ctrlKey: true, altKey: true, getModifierState: (key: string) => key === 'AltGraph' }
    expect(actionFor(defaultKeyMap, pressed('[', altGr))).toBe('loopStart')
    expect(keyName(pressed('[', { ctrlKey: true, altKey: true }))).toBe('Mod+Alt+[')
  })

  it('comes back from the choices that are kept of it, whatever was given to what', () => {
    const key = fc.constantFrom('Space', 'l', 'q', 'PageUp', 'Shift+ArrowUp', 'Mod+z', '?')
    const step = fc.tuple(fc.constantFrom(...keyActions), fc.uniqueArray(key, { maxLength: 3 }))
    fc.assert(
      fc.property(fc.array(step, { maxLength: 6 }), (steps) => {
        const map = steps.reduce((before, [action, keys]) => rebind(before, action, keys), defaultKeyMap)
        const choices = choicesOf(map)
        expect(keyMapFrom(choices)).toEqual(map)
        expect(KeyChoices.safeParse(choices).success).toBe(true)
        const all = map.flatMap(({ keys }) => keys)
        expect(new Set(all).size).toBe(all.length)
      }),
      { numRuns: 60 }
    )
    expect(choicesOf(defaultKeyMap)).toEqual({})
  })

  it('takes a key of an action that came later away where a person had chosen it for another', () => {
    const map = keyMapFrom({ zoomIn: ['k'] })
    expect([actionFor(map, pressed('k')), actionFor(map, pressed('ArrowUp'))]).toEqual(['zoomIn', null])
  })

  it('shows keys as they are engraved', () => {
    expect([shownKey('Mod+Shift+z'), shownKey('Mod+z', true), shownKey('ArrowLeft'), shownKey('[')]).toEqual([
      'Ctrl Shift Z',
      '⌘ Z',
      '←',
      '['
    ])
  })
})

const Desk = ({ spy, options }: { spy: (name: string) => void; options?: KeyOptions }) => {
  useTransportKeys(
    {
      playPause: () => spy('playPause'),
      loop: () => spy('loop'),
      backBar: () => spy('backBar'),
      undo: () => spy('undo')
    },
    options
  )
  return (
    <>
      <textarea aria-label="words" />
      <input aria-label="title" />
      <div contentEditable aria-label="free" role="textbox" tabIndex={0} />
      <button type="button">Settle</button>
      <div role="slider" aria-valuenow={0} aria-label="place" tabIndex={0} />
    </>
  )
}

describe('useTransportKeys', () => {
  it('plays by Space and by pedal when nobody writes', async () => {
    const spy = vi.fn()
    render(<Desk spy={spy} />)
    await userEvent.keyboard(' l{PageDown}{PageUp}')
    expect(spy.mock.calls.flat()).toEqual(['playPause', 'loop', 'playPause', 'backBar'])
  })

  // WCAG 2.2, 2.1.4: the check of trust.md types all letters, digits and Space in the comment box.
  it.each(['words', 'title', 'free'])('never fires while writing in %s', async (box) => {
    const spy = vi.fn()
    render(<Desk spy={spy} />)
    await userEvent.click(screen.getByLabelText(box))
    await userEvent.keyboard('abcdefghijklmnopqrstuvwxyz 0123456789,.[[]=?{ArrowLeft}{Control>}z{/Control}')
    expect(spy).not.toHaveBeenCalled()
  })

  it('leaves Space to a focused button and arrows to a slider', async () => {
    const spy = vi.fn()
    render(<Desk spy={spy} />)
    screen.getByText('Settle').focus()
    await userEvent.keyboard(' l')
    screen.getByLabelText('place').focus()
    await userEvent.keyboard('{ArrowLeft}')
    expect(spy.mock.calls.flat()).toEqual(['loop'])
  })

  it('can be switched off, but for undo', async () => {
    const spy = vi.fn()
    render(<Desk spy={spy} options={{ isOff: true }} />)
    await userEvent.keyboard(' l{PageDown}{Control>}z{/Control}')
    expect(spy.mock.calls.flat()).toEqual(['undo'])
  })

  it('can be given other keys', async () => {
    const spy = vi.fn()
    render(<Desk spy={spy} options={{ map: rebind(defaultKeyMap, 'playPause', ['p']) }} />)
    await userEvent.keyboard(' p')
    expect(spy.mock.calls.flat()).toEqual(['playPause'])
  })

  it('stops listening when the desk is gone', async () => {
    const spy = vi.fn()
    render(<Desk spy={spy} />).unmount()
    await userEvent.keyboard(' ')
    expect(spy).not.toHaveBeenCalled()
  })
})
