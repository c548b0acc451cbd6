// The loops that one person keeps on a take: seen by nobody else.
import { useRef, useState } from 'react'
import type { SavedLoop } from '@shared/contracts/saved-loops'
import { limits } from '@shared/limits'
import type { Span } from '@shared/timing/types'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { TextField } from '@client/ui/text-field'
import { useToast } from '@client/ui/toasts'
import { type LoopToKeep, useSavedLoopActs, useSavedLoops } from './api'
import { LoopRow } from './loop-row'

export interface SavedLoopsProps {
  takeId: string
  /** What "Keep this loop" would keep: the loop that is on, or the selection. Null where there is neither. */
  current: LoopToKeep | null
  /** "bars 17 to 20". */
  wordsFor: (span: Span) => string
  /** The loop that is on, where it is one of these. */
  loopingId?: string | null
  onLoop: (loop: SavedLoop) => void
}

export function SavedLoops({ takeId, current, wordsFor, loopingId = null, onLoop }: SavedLoopsProps) {
  const list = useSavedLoops(takeId)
  const acts = useSavedLoopActs(takeId)
  const toast = useToast()
  const section = useRef<HTMLElement>(null)
  const loops = list.data?.items ?? []
  const fault = acts.fault ?? list.error
  const isFull = loops.length >= limits.savedLoopsPerTake

  const remove = (loop: SavedLoop): void => {
    const bringBack = acts.remove(loop)
    toast({ text: `“${loop.name}” deleted.`, undo: bringBack })
    // The button that was pressed is gone with its row.
    section.current?.focus()
  }

  return (
    <section ref={section} tabIndex={-1} aria-label="Saved loops" className="grid gap-2">
      {fault ? <Notice kind="fault">{fault.message}</Notice> : null}
      {loops.length > 0 ? (
        <ul className="grid">
          {loops.map((loop) => (
            <LoopRow
              key={loop.id}
              loop={loop}
              place={wordsFor(loop.span)}
              isOn={loop.id === loopingId}
              onLoop={() => onLoop(loop)}
              onRename={(name) => acts.change(loop.id, { name })}
              onRemove={() => remove(loop)}
            />
          ))}
        </ul>
      ) : list.isSuccess ? (
        <p className="text-sm text-pencil">Loops that you keep on this take stand here. Only you see them.</p>
      ) : null}
      {isFull ? (
        <p className="text-sm text-pencil">
          {limits.savedLoopsPerTake} loops are kept here; delete one to keep another.
        </p>
      ) : current ? (
        <KeepForm place={wordsFor(current.span)} onKeep={(name) => acts.keep(name, current)} />
      ) : (
        <p className="text-sm text-pencil">Select bars to keep them as a loop.</p>
      )}
    </section>
  )
}

/** Without a name of its own a loop is called by its place. */
function KeepForm({ place, onKeep }: { place: string; onKeep: (name: string) => void }) {
  const [name, setName] = useState('')
  return (
    <form
      className="flex flex-wrap items-end gap-2"
      onSubmit={(event) => {
        event.preventDefault()
        onKeep(name.trim() || place.slice(0, limits.savedLoopName))
        setName('')
      }}
    >
      <div className="min-w-0 flex-1 basis-40">
        <TextField
          label="Name of this loop"
          placeholder={place}
          autoComplete="off"
          maxLength={limits.savedLoopName}
          value={name}
          onChange={(event) => setName(event.target.value)}
        />
      </div>
      <Button type="submit" icon="loop">
        Keep this loop
      </Button>
    </form>
  )
}
