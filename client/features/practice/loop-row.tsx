import { useEffect, useRef, useState } from 'react'
import type { SavedLoop } from '@shared/contracts/saved-loops'
import { limits } from '@shared/limits'
import { ladderWords } from '@shared/practice/ladder'
import { Button } from '@client/ui/button'
import { cx } from '@client/ui/classes'
import { IconButton } from '@client/ui/icon-button'
import { Menu } from '@client/ui/menu'
import { TextField } from '@client/ui/text-field'

export interface LoopRowProps {
  loop: SavedLoop
  /** "bars 17 to 20". */
  place: string
  isOn: boolean
  onLoop: () => void
  onRename: (name: string) => void
  onRemove: () => void
}

/** How it is practised, in words: "60 % to 100 %, up 5 after 4 times · 4 beats of rest". */
const howWords = ({ rate, ladder, restBeats }: SavedLoop): string =>
  [
    ladder ? ladderWords(ladder) : rate === null ? '' : `${Math.round(rate * 100)} %`,
    restBeats > 0 ? `${restBeats} ${restBeats === 1 ? 'beat' : 'beats'} of rest` : ''
  ]
    .filter(Boolean)
    .join(' · ')

export function LoopRow({ loop, place, isOn, onLoop, onRename, onRemove }: LoopRowProps) {
  const [isRenaming, setRenaming] = useState(false)
  const row = useRef<HTMLLIElement>(null)
  const wasRenaming = useRef(false)
  useEffect(() => {
    // Back to where renaming was chosen.
    if (wasRenaming.current && !isRenaming) row.current?.querySelector('button')?.focus()
    wasRenaming.current = isRenaming
  }, [isRenaming])
  const how = howWords(loop)
  return (
    <li ref={row} className="flex items-center gap-2 border-b border-rule py-1.5 last:border-b-0">
      {isRenaming ? (
        <RenameForm
          name={loop.name}
          onName={(name) => {
            if (name && name !== loop.name) onRename(name)
            setRenaming(false)
          }}
        />
      ) : (
        <>
          <IconButton
            icon="loop"
            label={isOn ? `“${loop.name}” is looping` : `Loop “${loop.name}”`}
            aria-pressed={isOn}
            onClick={onLoop}
          />
          <div className="grid min-w-0 flex-1 leading-tight">
            <span className={cx('break-words', isOn && 'font-semibold')}>{loop.name}</span>
            <span className="text-sm break-words text-pencil">
              {loop.name === place ? null : place}
              {how && loop.name !== place ? ' · ' : null}
              {how}
            </span>
          </div>
          <Menu
            label={`More about “${loop.name}”`}
            icon="more"
            items={[
              { key: 'rename', label: 'Rename', icon: 'pencil', onChoose: () => setRenaming(true) },
              { key: 'remove', label: 'Delete', icon: 'bin', onChoose: onRemove }
            ]}
          />
        </>
      )}
    </li>
  )
}

/** Enter keeps the name, Esc the old one. */
function RenameForm({ name: before, onName }: { name: string; onName: (name: string | null) => void }) {
  const [name, setName] = useState(before)
  const form = useRef<HTMLFormElement>(null)
  useEffect(() => {
    const input = form.current?.querySelector('input')
    input?.focus()
    input?.select()
  }, [])
  return (
    <form
      ref={form}
      className="flex min-w-0 flex-1 flex-wrap items-center gap-2"
      onSubmit={(event) => {
        event.preventDefault()
        onName(name.trim() || null)
      }}
    >
      <div className="min-w-0 flex-1 basis-40">
        <TextField
          label={`New name for “${before}”`}
          labelHidden
          autoComplete="off"
          maxLength={limits.savedLoopName}
          value={name}
          onChange={(event) => setName(event.target.value)}
          onKeyDown={(event) => {
            if (event.key !== 'Escape') return
            event.preventDefault()
            event.stopPropagation()
            onName(null)
          }}
        />
      </div>
      <Button type="submit">Rename</Button>
      <Button look="quiet" onClick={() => onName(null)}>
        Never mind
      </Button>
    </form>
  )
}
