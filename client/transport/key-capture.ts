// Waits for the one key that is to do something from now on. While it waits nothing else hears keys.
import { useRef } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { keyName } from './keys'

/** Held on the way to another key, or said by a keyboard that is still composing a letter. */
const halfKeys = new Set([
  'Shift',
  'Control',
  'Alt',
  'AltGraph',
  'Meta',
  'CapsLock',
  'NumLock',
  'Fn',
  'Dead',
  'Process',
  'Compose',
  'Unidentified'
])
/** The page never sees these, or everybody needs them for something else (copying, pressing buttons, moving the focus). */
const keptKeys = new Set([
  ...['a', 'c', 'f', 'l', 'n', 'p', 'q', 'r', 't', 'v', 'w', 'x', '0', '+', '-'].map((key) => `Mod+${key}`),
  ...['n', 'r', 't', 'w'].map((key) => `Mod+Shift+${key}`),
  'Enter',
  'F5',
  'F6',
  'F11',
  'F12',
  'ContextMenu',
  'Alt+F4',
  'Alt+ArrowLeft',
  'Alt+ArrowRight'
])

/** Whether a key stays with the browser and the page and can be given to no action. */
export const isKeptKey = (name: string): boolean => keptKeys.has(name) || /(^|\+)(Escape|Tab)$/.test(name)

/** The name of the key that a press gives, null where it is only half of one. */
export const capturedKey = (event: KeyboardEvent): string | null =>
  event.isComposing || halfKeys.has(event.key) ? null : keyName(event)

export interface KeyCapture {
  onKey: (name: string) => void
  /** Esc, or Tab (which moves on as usual). */
  onLeave: () => void
}

/** Listens before everybody else while `isOn`, so that the key does not do what it did before. */
export const useKeyCapture = (isOn: boolean, capture: KeyCapture): void => {
  const latest = useLatest(capture)
  const held = useRef<string | null>(null)
  useScope(
    (scope) => {
      if (!isOn) return
      const handleDown = (event: KeyboardEvent): void => {
        if (event.key === 'Tab') return latest.current.onLeave()
        event.preventDefault()
        event.stopImmediatePropagation()
        held.current = event.code
        if (event.key === 'Escape') return latest.current.onLeave()
        const name = event.repeat ? null : capturedKey(event)
        if (name) latest.current.onKey(name)
      }
      scope.listen(window, 'keydown', handleDown, { capture: true })
    },
    [isOn, latest]
  )
  useScope((scope) => {
    // Firefox presses the focused button when Space comes up, whatever became of its going down.
    const handleUp = (event: KeyboardEvent): void => {
      if (held.current !== null && held.current === event.code) event.preventDefault()
      held.current = null
    }
    scope.listen(window, 'keyup', handleUp, { capture: true })
  }, [])
}
