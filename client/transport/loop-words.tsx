import { ordinal } from '@shared/music/ordinal'

export interface LoopWordsProps {
  /** Of the loop that is on, else of the selection: "bars 17 to 20". */
  words: string | null
  isOn: boolean
  /** Passes done. */
  turns: number
  /** Said where the loop itself decides it. */
  percent: number | null
  /** The key that does the same. */
  keys: string | undefined
  onToggle: () => void
}

/** What is looped and how often it has come round; a press turns it on or off. */
export function LoopWords({ words, isOn, turns, percent, keys, onToggle }: LoopWordsProps) {
  return (
    <button
      type="button"
      aria-pressed={isOn}
      disabled={words === null}
      aria-keyshortcuts={keys}
      onClick={onToggle}
      className="grid min-h-9 min-w-0 flex-1 rounded text-left leading-tight not-disabled:hover:bg-wash sm:max-w-72 sm:min-w-44"
    >
      <span className="truncate text-xs text-pencil">
        {isOn ? (
          <>
            Loop · {ordinal(turns + 1)} time{percent === null ? null : ` at ${percent} %`}
          </>
        ) : words === null ? (
          'Loop'
        ) : (
          'Loop, off'
        )}
      </span>
      <span className={words === null ? 'truncate text-pencil' : 'truncate'}>
        {words ?? 'select bars to loop them'}
      </span>
    </button>
  )
}
