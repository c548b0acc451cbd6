import { useId, useRef } from 'react'
import type { KeyboardEvent, ReactNode } from 'react'
import { cx } from './classes'

export interface Tab<K extends string = string> {
  key: K
  label: ReactNode
  panel: ReactNode
}

export interface TabsProps<K extends string> {
  /** What the tabs choose between. */
  label: string
  tabs: readonly Tab<K>[]
  chosen: K
  onChoose: (key: K) => void
  /** Panels fill the height given and scroll by themselves. */
  fill?: boolean
}

/** APG tabs with automatic activation; only the chosen panel is in the page. */
export function Tabs<K extends string>({ label, tabs, chosen, onChoose, fill = false }: TabsProps<K>) {
  const id = useId()
  const list = useRef<HTMLDivElement>(null)

  function handleKeyDown(event: KeyboardEvent) {
    const at = tabs.findIndex(({ key }) => key === chosen)
    const targets: Record<string, number> = {
      ArrowRight: (at + 1) % tabs.length,
      ArrowLeft: (at - 1 + tabs.length) % tabs.length,
      Home: 0,
      End: tabs.length - 1
    }
    const to = targets[event.key] ?? -1
    const next = tabs[to]
    if (!next) return
    event.preventDefault()
    onChoose(next.key)
    list.current?.querySelectorAll<HTMLElement>('[role="tab"]')[to]?.focus()
  }

  const panel = tabs.find(({ key }) => key === chosen)
  return (
    <div className={cx('min-w-0', fill && 'flex h-full min-h-0 flex-col')}>
      <div ref={list} role="tablist" aria-label={label} className="flex gap-x-6 overflow-x-auto border-b border-rule">
        {tabs.map((tab) => {
          const isChosen = tab.key === chosen
          return (
            <button
              key={tab.key}
              type="button"
              role="tab"
              id={`${id}-tab-${tab.key}`}
              aria-selected={isChosen}
              aria-controls={isChosen ? `${id}-panel` : undefined}
              tabIndex={isChosen ? 0 : -1}
              onClick={() => onChoose(tab.key)}
              onKeyDown={handleKeyDown}
              className={cx(
                'min-h-10 flex-none border-b-2 text-base -outline-offset-2',
                isChosen ? 'border-ink text-ink' : 'border-transparent text-pencil hover:text-ink'
              )}
            >
              {tab.label}
            </button>
          )
        })}
      </div>
      {panel ? (
        <div
          role="tabpanel"
          id={`${id}-panel`}
          aria-labelledby={`${id}-tab-${panel.key}`}
          tabIndex={0}
          className={cx('-outline-offset-2 pt-3', fill && 'min-h-0 flex-1 overflow-y-auto')}
        >
          {panel.panel}
        </div>
      ) : null}
    </div>
  )
}
