import { useId, useState } from 'react'
import { useScope } from '@client/lib/scope'
import { exactWords, relativeWords } from './relative-words'

export interface RelativeTimeProps {
  /** ISO-8601. */
  at: string
  /** Leaves it out of the tab order in long lists, where the exact time can be had another way. */
  notFocusable?: boolean
}

/** "2 hours ago", with the exact time on hover and focus. */
export function RelativeTime({ at, notFocusable = false }: RelativeTimeProps) {
  const id = useId()
  const [now, setNow] = useState(() => new Date())
  const [isShown, setShown] = useState(false)
  useScope((scope) => void scope.interval(() => setNow(new Date()), 60_000), [])
  const date = new Date(at)
  return (
    // The tip can be had by hover and focus and be sent away with Esc (WCAG 1.4.13).
    // oxlint-disable-next-line jsx-a11y/no-static-element-interactions
    <span
      className="relative inline-block"
      onPointerEnter={() => setShown(true)}
      onPointerLeave={() => setShown(false)}
      onFocus={() => setShown(true)}
      onBlur={() => setShown(false)}
      onKeyDown={(event) => {
        if (event.key === 'Escape') setShown(false)
      }}
    >
      {/* oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex -- the exact time is for keyboards too */}
      <time dateTime={at} tabIndex={notFocusable ? undefined : 0} aria-describedby={isShown ? id : undefined}>
        {relativeWords(date, now)}
      </time>
      {isShown ? (
        <span
          id={id}
          role="tooltip"
          className="absolute bottom-full left-0 z-20 mb-1 rounded bg-ink px-2 py-1 text-xs whitespace-nowrap text-sheet"
        >
          {exactWords(date)}
        </span>
      ) : null}
    </span>
  )
}
