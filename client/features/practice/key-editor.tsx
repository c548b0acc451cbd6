// Every action with its keys, and how to give it others.
import { useRef, useState } from 'react'
import { isKeptKey, useKeyCapture } from '@client/transport/key-capture'
import { KeyList } from '@client/transport/key-list'
import {
  choicesOf,
  defaultKeyMap,
  rebind,
  shownKey,
  type KeyBinding,
  type TransportAction
} from '@client/transport/keys'
import { Button } from '@client/ui/button'
import { KeyRow } from './key-row'

export interface KeyEditorProps {
  map: readonly KeyBinding[]
  onMap: (map: KeyBinding[]) => void
}

interface Said {
  words: string
  /** What Undo goes back to. */
  before?: KeyBinding[]
}

const bindingOf = (map: readonly KeyBinding[], action: TransportAction): Pick<KeyBinding, 'label' | 'keys'> =>
  map.find((binding) => binding.action === action) ?? { label: action, keys: [] }

/** What giving a key means in words; names the action that loses it. */
export const givenWords = (map: readonly KeyBinding[], action: TransportAction, key: string): string => {
  const given = `${shownKey(key)} is now “${bindingOf(map, action).label}”.`
  const loser = map.find((binding) => binding.action !== action && binding.keys.includes(key))
  if (!loser) return given
  const left = loser.keys.filter((other) => other !== key).map((other) => shownKey(other))
  return `${given} “${loser.label}” loses it and ${left.length === 0 ? 'has no key any more' : `keeps ${left.join(' and ')}`}.`
}

const takenWords = (map: readonly KeyBinding[], action: TransportAction, key: string): string => {
  const { label, keys } = bindingOf(map, action)
  return `${shownKey(key)} is free.${keys.length === 1 ? ` “${label}” has no key any more.` : ''}`
}

export function KeyEditor({ map, onMap }: KeyEditorProps) {
  const [isOpen, setOpen] = useState(false)
  const [waiting, setWaiting] = useState<TransportAction | null>(null)
  const [said, setSaid] = useState<Said | null>(null)
  const rows = useRef<HTMLUListElement>(null)

  const wait = (action: TransportAction | null): void => {
    setSaid(null)
    setWaiting(action)
  }
  const change = (next: KeyBinding[], words: string): void => {
    setWaiting(null)
    setSaid({ words, before: [...map] })
    onMap(next)
  }
  const give = (action: TransportAction, key: string): void => {
    const { keys } = bindingOf(map, action)
    if (isKeptKey(key)) return setSaid({ words: `${shownKey(key)} belongs to the browser. Press another key.` })
    if (!keys.includes(key)) return change(rebind(map, action, [...keys, key]), givenWords(map, action, key))
    setWaiting(null)
    setSaid({ words: `${shownKey(key)} does that already.` })
  }
  const takeAway = (action: TransportAction, key: string): void => {
    const left = bindingOf(map, action).keys.filter((other) => other !== key)
    change(rebind(map, action, left), takenWords(map, action, key))
    // The button that was pressed goes: the focus stays in its row.
    rows.current?.querySelector<HTMLElement>(`[data-new-key="${action}"]`)?.focus()
  }
  useKeyCapture(waiting !== null, {
    onKey: (key) => {
      if (waiting) give(waiting, key)
    },
    onLeave: () => wait(null)
  })

  const isUsual = Object.keys(choicesOf(map)).length === 0
  const waits = waiting
    ? `Press the new key for “${bindingOf(map, waiting).label}”, or step on the pedal: what it sends is taken. Esc leaves it as it is.`
    : null
  const words = waits && said ? `${said.words} ${waits}` : (waits ?? said?.words)

  return (
    <div className="grid gap-3">
      {isOpen ? (
        <ul ref={rows} aria-label="Actions and their keys" className="grid">
          {map.map((binding) => (
            <KeyRow
              key={binding.action}
              binding={binding}
              isWaiting={waiting === binding.action}
              onWait={(isWaiting) => wait(isWaiting ? binding.action : null)}
              onTakeAway={(key) => takeAway(binding.action, key)}
            />
          ))}
        </ul>
      ) : (
        <KeyList map={map} />
      )}
      {/* Down over the padding of the dialog: nothing shows below it. */}
      <div className="sticky -bottom-2 -mx-5 grid gap-2 border-t border-rule bg-sheet px-5 pt-2 pb-4">
        {isOpen ? (
          <p role="status" className="min-h-10 text-sm">
            {words ?? 'Take a key away by pressing it here. A key that you give is lost to what it did before.'}
          </p>
        ) : null}
        <div className="flex flex-wrap items-center gap-2">
          <Button
            aria-expanded={isOpen}
            onClick={() => {
              setOpen(!isOpen)
              wait(null)
            }}
          >
            {isOpen ? 'Done' : 'Change keys'}
          </Button>
          {said?.before && !waiting ? (
            <Button
              look="quiet"
              icon="undo"
              onClick={() => {
                if (said.before) onMap(said.before)
                setSaid({ words: 'As it was before.' })
              }}
            >
              Undo
            </Button>
          ) : null}
          {isOpen && !isUsual ? (
            <Button look="quiet" onClick={() => change(defaultKeyMap, 'Every action has its first keys again.')}>
              Back to the first keys
            </Button>
          ) : null}
        </div>
      </div>
    </div>
  )
}
