import { useId } from 'react'
import type { ReactNode } from 'react'
import { cx } from './classes'
import { IconButton } from './icon-button'
import { useModal } from './modal'

export interface DialogProps {
  title: ReactNode
  children: ReactNode
  /** Buttons, the safe one first. */
  actions?: ReactNode
  /** Esc, the cross, or a click outside. Render the dialog only while it is open. */
  onClose: () => void
  /** Ignores Esc and clicks outside while something must be answered. */
  mustAnswer?: boolean
  /** `side` slides along the right edge (a sheet for reading or for many fields); on a phone both fill the width. */
  place?: 'middle' | 'side'
}

export function Dialog({ title, children, actions, onClose, mustAnswer = false, place = 'middle' }: DialogProps) {
  const id = useId()
  const dialog = useModal()
  return (
    // Esc does from the keyboard what the click outside does here.
    // oxlint-disable-next-line jsx-a11y/click-events-have-key-events, jsx-a11y/no-noninteractive-element-interactions
    <dialog
      ref={dialog}
      aria-labelledby={id}
      className={cx(
        'plumb-dialog fixed max-h-none border border-rule bg-sheet p-0 text-ink',
        place === 'middle'
          ? 'm-auto max-h-[calc(100dvh-2rem)] w-[min(34rem,calc(100vw-1.5rem))]'
          : 'mt-0 mr-0 mb-0 ml-auto h-dvh w-[min(28rem,100vw)] max-w-none border-y-0 border-r-0'
      )}
      onCancel={(event) => {
        event.preventDefault()
        if (!mustAnswer) onClose()
      }}
      onClick={(event) => {
        if (event.target === event.currentTarget && !mustAnswer) onClose()
      }}
    >
      <div className={cx('flex flex-col', place === 'side' ? 'h-full' : 'max-h-[calc(100dvh-2.2rem)]')}>
        <header className="flex items-start justify-between gap-4 px-5 pt-4 pb-2">
          <h2 id={id} className="min-w-0 pt-1 text-lg font-semibold break-words">
            {title}
          </h2>
          {mustAnswer ? null : <IconButton icon="close" label="Close" onClick={onClose} />}
        </header>
        <div className="min-h-0 flex-1 overflow-y-auto px-5 py-2">{children}</div>
        {actions ? <footer className="flex flex-wrap justify-end gap-3 px-5 pt-3 pb-5">{actions}</footer> : null}
      </div>
    </dialog>
  )
}
