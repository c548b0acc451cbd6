import { limits } from '@shared/limits'
import { shownKey, type KeyBinding } from '@client/transport/keys'

export interface KeyRowProps {
  binding: KeyBinding
  /** The next key that is pressed goes here. */
  isWaiting: boolean
  onWait: (isWaiting: boolean) => void
  onTakeAway: (key: string) => void
}

/** One action: a press on a key takes it away, "new key" waits for another. */
export function KeyRow({ binding, isWaiting, onWait, onTakeAway }: KeyRowProps) {
  const { action, label, keys } = binding
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-3 gap-y-1 border-b border-rule py-1 last:border-b-0">
      <span className="min-w-0">{label}</span>
      <span className="ml-auto flex flex-wrap items-center justify-end gap-1">
        {keys.length === 0 ? <span className="px-1 text-sm text-pencil">no key</span> : null}
        {keys.map((key) => (
          <button
            key={key}
            type="button"
            aria-label={`Take ${shownKey(key)} from “${label}”`}
            title="Take this key away"
            className="inline-flex min-h-8 items-center gap-1.5 rounded border border-pencil px-1.5 text-sm whitespace-nowrap hover:bg-wash"
            onClick={() => onTakeAway(key)}
          >
            <kbd className="font-sans">{shownKey(key)}</kbd>
            <span aria-hidden="true" className="text-pencil">
              ×
            </span>
          </button>
        ))}
        <button
          type="button"
          data-new-key={action}
          aria-label={`New key for “${label}”`}
          aria-pressed={isWaiting}
          disabled={keys.length >= limits.keysPerAction}
          className="min-h-8 rounded px-1.5 text-sm text-pencil underline decoration-dotted underline-offset-2 hover:text-ink disabled:opacity-50 aria-pressed:bg-wash aria-pressed:text-ink"
          onClick={() => onWait(!isWaiting)}
        >
          {isWaiting ? 'press a key' : 'new key'}
        </button>
      </span>
    </li>
  )
}
