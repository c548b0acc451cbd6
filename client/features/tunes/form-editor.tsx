// The form: which sections there are, and in which order they are played.
import { useRef, useState, type KeyboardEvent } from 'react'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits, type ChartOperation } from '@shared/music/chart-schema'
import { formLength } from '@shared/music/form'
import type { ChartBody, ChartSection } from '@shared/music/types'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { cx } from '@client/ui/classes'
import { IconButton } from '@client/ui/icon-button'
import { Sentence, SentenceChoice } from '@client/ui/sentence'
import { TextField } from '@client/ui/text-field'

interface FormEditorProps {
  body: ChartBody
  onEdit: (operations: ChartOperation[]) => void
  /** Opens the bars of a section as text. */
  onWrite: (sectionId: string) => void
}

const moved = (order: readonly string[], from: number, to: number): string[] => {
  const rest = order.filter((_, i) => i !== from)
  return [...rest.slice(0, to), order[from] as string, ...rest.slice(to)]
}

const freeName = (sections: readonly ChartSection[]): string =>
  [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'].find((letter) => sections.every(({ name }) => name !== letter)) ?? 'A'

export function FormEditor({ body, onEdit, onWrite }: FormEditorProps) {
  const length = formLength(body)
  const addSection = (): void => {
    const section: ChartSection = { id: freshId(), name: freeName(body.sections), bars: Array<string>(8).fill('') }
    onEdit([
      { kind: 'addSection', section, at: body.sections.length },
      { kind: 'setOrder', order: [...body.order, section.id] }
    ])
  }
  return (
    <div className="grid gap-4">
      <Order body={body} onEdit={onEdit} />
      <Sentence label="How the form goes on">
        {`${length} ${length === 1 ? 'bar' : 'bars'}, played `}
        <SentenceChoice<'round' | 'once'>
          label="how the form goes on"
          value={body.cyclic ? 'round' : 'once'}
          choices={[
            { value: 'round', label: 'round and round, chorus after chorus' },
            { value: 'once', label: 'from start to end' }
          ]}
          onChange={(way) => onEdit([{ kind: 'setCyclic', cyclic: way === 'round' }])}
        />
        {'.'}
      </Sentence>
      <ul aria-label="Sections" className="grid border-t border-rule">
        {body.sections.map((section) => (
          <SectionLine key={section.id} section={section} body={body} onEdit={onEdit} onWrite={onWrite} />
        ))}
      </ul>
      <div>
        <Button icon="plus" disabled={body.sections.length >= chartLimits.sections} onClick={addSection}>
          A new section
        </Button>
      </div>
    </div>
  )
}

function Order({ body, onEdit }: Pick<FormEditorProps, 'body' | 'onEdit'>) {
  const { order, sections } = body
  const [at, setAt] = useState<number | null>(null)
  const row = useRef<HTMLDivElement>(null)
  const chosen = at !== null && at < order.length ? at : null
  const name = (id: string | undefined) => sections.find((section) => section.id === id)?.name ?? ''
  const focus = (index: number): void =>
    queueMicrotask(() => row.current?.querySelectorAll<HTMLElement>('button')[index]?.focus())

  const set = (next: string[], chosenNext: number | null): void => {
    if (next.length > chartLimits.order) return
    onEdit([{ kind: 'setOrder', order: next }])
    setAt(chosenNext)
    if (chosenNext !== null) focus(chosenNext)
  }
  const move = (from: number, step: number): void => {
    const to = from + step
    if (to >= 0 && to < order.length) set(moved(order, from, to), to)
  }
  const repeat = (from: number): void =>
    set([...order.slice(0, from + 1), order[from] as string, ...order.slice(from + 1)], from + 1)
  const takeOut = (from: number): void =>
    set(
      order.filter((_, i) => i !== from),
      order.length > 1 ? Math.min(from, order.length - 2) : null
    )
  const handleKey = (event: KeyboardEvent, index: number): void => {
    const step = { ArrowLeft: -1, ArrowRight: 1 }[event.key]
    if (step !== undefined && event.altKey) move(index, step)
    else if (step !== undefined) focus(index + step)
    else if (event.key === 'Delete') takeOut(index)
    else return
    event.preventDefault()
  }
  return (
    <div className="grid gap-2">
      <p className="text-sm text-pencil" id="played-order">
        Played in this order
      </p>
      {order.length === 0 ? <p>Nothing is played yet: add a section below.</p> : null}
      <div
        ref={row}
        role="group"
        aria-labelledby="played-order"
        className="flex flex-wrap items-center gap-x-1 gap-y-2"
      >
        {order.map((id, index) => (
          <button
            // The same section may stand there several times: its place is its name.
            // oxlint-disable-next-line react/no-array-index-key
            key={`${id}-${index}`}
            type="button"
            aria-pressed={index === chosen}
            aria-label={`${name(id)}, ${index + 1} of ${order.length}`}
            tabIndex={index === (chosen ?? 0) ? 0 : -1}
            className={cx(
              'min-h-9 min-w-9 border-b-2 px-2 text-lg font-semibold hover:bg-wash',
              index === chosen ? 'border-ink bg-wash' : 'border-transparent'
            )}
            onClick={() => setAt(index)}
            onFocus={() => setAt(index)}
            onKeyDown={(event) => handleKey(event, index)}
          >
            {name(id)}
          </button>
        ))}
      </div>
      {chosen === null ? (
        order.length > 0 ? (
          <p className="text-sm text-pencil">Choose one to move it, repeat it or take it out.</p>
        ) : null
      ) : (
        <div className="flex flex-wrap items-center gap-1">
          <IconButton
            icon="arrowLeft"
            look="plain"
            label={`Move ${name(order[chosen])} earlier`}
            keys="Alt ←"
            disabled={chosen === 0}
            onClick={() => move(chosen, -1)}
          />
          <IconButton
            icon="arrowRight"
            look="plain"
            label={`Move ${name(order[chosen])} later`}
            keys="Alt →"
            disabled={chosen === order.length - 1}
            onClick={() => move(chosen, 1)}
          />
          <Button look="quiet" icon="plus" onClick={() => repeat(chosen)}>
            Play it once more
          </Button>
          <Button look="quiet" icon="bin" onClick={() => takeOut(chosen)}>
            Take it out here
          </Button>
        </div>
      )}
    </div>
  )
}

interface SectionLineProps extends FormEditorProps {
  section: ChartSection
}

function SectionLine({ section, body, onEdit, onWrite }: SectionLineProps) {
  const [draft, setDraft] = useState<string | null>(null)
  const { id, name, bars } = section
  const times = body.order.filter((played) => played === id).length
  const rename = (): void => {
    const next = draft?.trim() ?? ''
    setDraft(null)
    if (next === '' || next === name) return
    const operation: ChartOperation = { kind: 'renameSection', sectionId: id, name: next }
    if (chartDocument.apply(body, operation).ok) onEdit([operation])
  }
  return (
    <li className="flex flex-wrap items-center gap-x-3 gap-y-1 border-b border-rule py-2">
      <div className="w-28">
        <TextField
          label={`Name of section ${name}`}
          labelHidden
          value={draft ?? name}
          maxLength={chartLimits.sectionName}
          onChange={(event) => setDraft(event.target.value)}
          onBlur={rename}
          onKeyDown={(event) => {
            if (event.key === 'Enter') rename()
            if (event.key === 'Escape') setDraft(null)
          }}
        />
      </div>
      <span className="min-w-28 flex-1 text-pencil">
        {`${bars.length} ${bars.length === 1 ? 'bar' : 'bars'}, `}
        {times === 0 ? 'not played' : times === 1 ? 'played once' : `played ${times} times`}
      </span>
      <div className="flex flex-wrap gap-1">
        <Button
          look="quiet"
          icon="plus"
          aria-label={`Play ${name} at the end`}
          onClick={() => onEdit([{ kind: 'setOrder', order: [...body.order, id] }])}
        >
          Play it
        </Button>
        <Button look="quiet" icon="pencil" aria-label={`Write ${name} as text`} onClick={() => onWrite(id)}>
          As text
        </Button>
        <Button
          look="quiet"
          icon="bin"
          aria-label={`Delete section ${name}`}
          onClick={() => onEdit([{ kind: 'removeSection', sectionId: id }])}
        >
          Delete
        </Button>
      </div>
    </li>
  )
}
