// Keys and pedals of the desk, as data: every action has keys, every key can be changed, all of them switched off
// (WCAG 2.2, 2.1.4). Keys never fire while somebody writes.
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import type { KeyAction } from '@shared/practice/key-actions'
import type { KeyChoices } from '@shared/practice/preferences'

export type TransportAction = KeyAction

export interface KeyBinding {
  action: TransportAction
  /** What the sheet says. */
  label: string
  /** `Space`, `ArrowLeft`, `l`, `[`, `Shift+ArrowLeft`, `Mod+z` (Mod is Ctrl, on a Mac Command). Kept in the order shown. */
  keys: string[]
}

/** Pedals send arrow or page keys: up and down turn pages on most, here they go back a bar and start or stop. */
export const defaultKeyMap: KeyBinding[] = [
  { action: 'playPause', label: 'Play or pause', keys: ['Space', 'PageDown'] },
  { action: 'backBar', label: 'Back a bar', keys: ['ArrowLeft', 'PageUp'] },
  { action: 'onBar', label: 'On a bar', keys: ['ArrowRight'] },
  { action: 'backBeat', label: 'Back a beat', keys: ['Shift+ArrowLeft'] },
  { action: 'onBeat', label: 'On a beat', keys: ['Shift+ArrowRight'] },
  { action: 'toStart', label: 'To the start of the loop, or of the take', keys: ['Home'] },
  { action: 'againBefore', label: 'Again from two bars before', keys: ['a'] },
  { action: 'loop', label: 'Loop the selection, or stop looping', keys: ['l'] },
  { action: 'loopStart', label: 'Start the selection here', keys: ['['] },
  { action: 'loopEnd', label: 'End the selection here', keys: [']'] },
  { action: 'slower', label: 'Slower by 5 %', keys: [','] },
  { action: 'faster', label: 'Faster by 5 %', keys: ['.'] },
  { action: 'fullSpeed', label: 'Back to 100 %', keys: ['='] },
  { action: 'pitchUp', label: 'A semitone up', keys: ['Shift+ArrowUp'] },
  { action: 'pitchDown', label: 'A semitone down', keys: ['Shift+ArrowDown'] },
  { action: 'octaveUp', label: 'An octave up, or back', keys: ['o'] },
  { action: 'lowFocus', label: 'Low focus on or off', keys: ['b'] },
  { action: 'clickOnOff', label: 'Click on or off', keys: ['k'] },
  { action: 'countIn', label: 'Count in, or start at once', keys: ['n'] },
  { action: 'tapTempo', label: 'Tap the tempo', keys: ['t'] },
  { action: 'zoomIn', label: 'Look nearer', keys: ['ArrowUp'] },
  { action: 'zoomOut', label: 'Look from farther', keys: ['ArrowDown'] },
  { action: 'follow', label: 'Follow the line, or stop following', keys: ['f'] },
  { action: 'comment', label: 'Write about the selection', keys: ['c'] },
  { action: 'undo', label: 'Undo', keys: ['Mod+z'] },
  { action: 'redo', label: 'Redo', keys: ['Mod+Shift+z', 'Mod+y'] },
  { action: 'keySheet', label: 'Show this sheet', keys: ['?'] }
]

type KeyLike = Pick<KeyboardEvent, 'key' | 'code' | 'shiftKey' | 'ctrlKey' | 'metaKey' | 'altKey'> &
  Partial<Pick<KeyboardEvent, 'getModifierState'>>

/** The name of a pressed key as key maps write it. A sign that needs Shift or AltGr to be typed (`?`, `[`) is written without. */
export const keyName = (event: KeyLike): string => {
  const base = event.key === ' ' ? 'Space' : event.key.length === 1 ? event.key.toLowerCase() : event.key
  const isSign = event.key.length === 1 && event.key !== ' ' && !/[\p{L}\p{N}]/u.test(event.key)
  // Windows reports AltGr as Ctrl and Alt.
  const isTyped = isSign && event.getModifierState?.('AltGraph') === true
  const mod = (event.ctrlKey || event.metaKey) && !isTyped
  const alt = event.altKey && !isTyped
  return `${mod ? 'Mod+' : ''}${alt ? 'Alt+' : ''}${event.shiftKey && !isSign ? 'Shift+' : ''}${base}`
}

export const actionFor = (map: readonly KeyBinding[], event: KeyLike): TransportAction | null => {
  const name = keyName(event)
  return map.find((binding) => binding.keys.includes(name))?.action ?? null
}

/** Gives `keys` to `action` and takes them away from whatever had them. */
export const rebind = (map: readonly KeyBinding[], action: TransportAction, keys: string[]): KeyBinding[] =>
  map.map((binding) =>
    binding.action === action
      ? { ...binding, keys }
      : { ...binding, keys: binding.keys.filter((key) => !keys.includes(key)) }
  )

/** The keys as they come, with a person's own choices on top. A chosen key is taken from the action that comes with it. */
export const keyMapFrom = (choices: KeyChoices): KeyBinding[] => {
  const chosen = new Set(Object.values(choices).flat())
  return defaultKeyMap.map((binding) => {
    const own = choices[binding.action]
    return { ...binding, keys: own ? [...own] : binding.keys.filter((key) => !chosen.has(key)) }
  })
}

/** What of a map is a person's own choice: the actions whose keys are not those they come with. */
export const choicesOf = (map: readonly KeyBinding[]): KeyChoices => {
  const choices: KeyChoices = {}
  for (const { action, keys } of map) {
    const usual = defaultKeyMap.find((binding) => binding.action === action)?.keys ?? []
    if (keys.length !== usual.length || keys.some((key, at) => key !== usual[at])) choices[action] = keys
  }
  return choices
}

const pressTypes = new Set(['button', 'checkbox', 'radio', 'range', 'color', 'file', 'submit', 'reset', 'image'])

/** True where letters are text: inputs, text areas, editable elements, lists that jump to a letter. */
export const isWriting = (target: EventTarget | null): boolean => {
  if (!(target instanceof HTMLElement)) return false
  if (target instanceof HTMLTextAreaElement || target instanceof HTMLSelectElement) return true
  if (target instanceof HTMLInputElement) return !pressTypes.has(target.type)
  if (target.isContentEditable || target.closest('[contenteditable=""], [contenteditable="true"]')) return true
  return (
    target.closest('[role="textbox"], [role="combobox"], [role="searchbox"], [role="listbox"], [role="menu"]') !== null
  )
}

const pressKeys = new Set(['Space', 'Enter'])
const moveKeys = /^(Shift\+)?(Arrow\w+|Home|End|PageUp|PageDown)$/

/** Controls keep the keys they live by: a focused button its Space, a slider or a grid its arrows. */
export const belongsToControl = (target: EventTarget | null, name: string): boolean => {
  if (!(target instanceof HTMLElement)) return false
  if (pressKeys.has(name) && target.closest('button, a[href], summary, input, [role="button"], [role="gridcell"]'))
    return true
  const moves = '[role="slider"], [role="grid"], [role="toolbar"], [role="tablist"], [role="radiogroup"], input, dialog'
  return moveKeys.test(name) && target.closest(moves) !== null
}

export type KeyActions = Partial<Record<TransportAction, () => void>>

export interface KeyOptions {
  map?: readonly KeyBinding[]
  /** Single keys switched off by the person; undo and redo with Ctrl or Command stay. */
  isOff?: boolean
}

/** Listens on the window while mounted. Only actions that are given here take their keys. */
export const useTransportKeys = (actions: KeyActions, options: KeyOptions = {}): void => {
  const latest = useLatest({ actions, options })
  useScope((scope) => {
    scope.listen(window, 'keydown', (event: KeyboardEvent) => {
      const { map = defaultKeyMap, isOff = false } = latest.current.options
      const name = keyName(event)
      if (event.defaultPrevented || event.isComposing || isWriting(event.target)) return
      if (isOff && !name.startsWith('Mod+')) return
      if (belongsToControl(event.target, name)) return
      const action = actionFor(map, event)
      const run = action && latest.current.actions[action]
      if (!run) return
      event.preventDefault()
      run()
    })
  }, [])
}

const shownNames: Record<string, string> = {
  ArrowLeft: '←',
  ArrowRight: '→',
  ArrowUp: '↑',
  ArrowDown: '↓',
  PageUp: 'Page up',
  PageDown: 'Page down',
  Mod: 'Ctrl'
}

/** `Mod+Shift+z` as a person reads it. */
export const shownKey = (name: string, isMac = false): string =>
  name
    .split(/\+(?=.)/)
    .map((part) =>
      part === 'Mod' && isMac ? '⌘' : (shownNames[part] ?? (part.length === 1 ? part.toUpperCase() : part))
    )
    .join(' ')
