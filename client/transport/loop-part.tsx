import type { ReactNode } from 'react'
import { Checkbox } from '@client/ui/checkbox'
import { Popover } from '@client/ui/popover'
import { Select, type Choice } from '@client/ui/select'
import { Part, WordsButton } from './part'
import type { LoopMannerControls } from './use-loop-manner'

const beats = (count: number): string => `${count} ${count === 1 ? 'beat' : 'beats'}`
const rests = [0, 1, 2, 3, 4, 6, 8, 12, 16]
/** A rest that a kept loop brought along stands in the list as well. */
const restChoices = (now: number): Choice[] =>
  [...new Set([...rests, now])]
    .toSorted((a, b) => a - b)
    .map((count) => ({ value: String(count), label: count === 0 ? 'No rest' : beats(count) }))

export interface LoopPartProps {
  manner: LoopMannerControls
  canRest: boolean
  isShared: boolean
  /** The loops one keeps; absent where nothing can be kept. */
  kept?: ReactNode
}

/** Between two passes, and the loops that are kept. */
export function LoopPart(props: LoopPartProps) {
  const { restBeats, hasSoftEnds } = props.manner
  const words = props.isShared
    ? null
    : [restBeats > 0 ? `${beats(restBeats)} of rest` : null, hasSoftEnds ? 'soft ends' : null].filter(Boolean)
  return (
    <Part label={props.kept ? 'Loops and rest' : 'Rest'}>
      <Popover
        label={props.kept ? 'Loops and rest' : 'Rest between passes'}
        align="end"
        renderTrigger={(trigger) => (
          <WordsButton {...trigger} aria-haspopup="dialog">
            {words?.length ? words.join(', ') : props.kept ? 'look and keep' : 'none'}
          </WordsButton>
        )}
      >
        {() => (
          <div className="w-80 max-w-full">
            <LoopSettings {...props} />
          </div>
        )}
      </Popover>
    </Part>
  )
}

export function LoopSettings({ manner, canRest, isShared, kept }: LoopPartProps) {
  return (
    <div className="grid gap-4">
      <div className="grid gap-3">
        <Select
          label="Rest between two passes"
          value={String(manner.restBeats)}
          choices={restChoices(manner.restBeats)}
          disabled={!canRest || isShared}
          onChange={(value) => manner.set({ restBeats: Number(value) })}
        />
        <Checkbox
          label="Soft ends"
          hint="Every pass comes in and goes out gently."
          checked={manner.hasSoftEnds && !isShared}
          disabled={!canRest || isShared}
          onChange={(hasSoftEnds) => manner.set({ hasSoftEnds })}
        />
        {isShared ? (
          <p className="text-sm text-pencil">
            While you listen together the loop goes round plainly, the same for everybody.
          </p>
        ) : null}
      </div>
      {kept ? <div className="border-t border-rule pt-3">{kept}</div> : null}
    </div>
  )
}
