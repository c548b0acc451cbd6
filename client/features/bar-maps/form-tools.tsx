import { useState } from 'react'
import { createFormMap } from '@shared/timing/passes'
import { passWords } from '@shared/timing/sections'
import type { BarMapBody, FormMark } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'
import { Button } from '@client/ui/button'
import { Sentence, SentenceNumber } from '@client/ui/sentence'
import { ActionRow, ActionRows } from '@client/features/bar-maps/action-row'
import type { BarEditorProps, TuneHint } from '@client/features/bar-maps/editor-props'
import { attempt } from '@client/features/bar-maps/use-bar-edits'

interface FormToolsProps extends Pick<BarEditorProps, 'edits'> {
  body: BarMapBody
  bar: BarIndex
  tune: TuneHint | null
}

/** Where the bars of the take stand in the form. */
export function FormTools({ body, bar, tune, edits }: FormToolsProps) {
  const [formBar, setFormBar] = useState(1)
  if (!tune || tune.formLength === 0)
    return (
      <p className="py-3 text-pencil">
        Bars stand in a form once the take belongs to a tune whose form is written. Until then they count through the
        take.
      </p>
    )
  const { formLength, cyclic } = tune
  const pass = cyclic ? 'chorus' : 'time through'
  const set = (mark: FormMark) => edits.run((now) => attempt(now, { kind: 'setMark', mark }))
  return (
    <>
      <ActionRows>
        <ActionRow says={`Another ${pass} begins with bar ${bar}, on bar 1 of the form.`}>
          <Button onClick={() => set({ bar, formBar: 1, newPass: true })}>
            A {pass} starts at bar {bar}
          </Button>
        </ActionRow>
        <ActionRow says="For introductions, interludes and endings: bars there have no place in the form.">
          <Button onClick={() => set({ bar, formBar: null, newPass: false })}>Outside the form from bar {bar}</Button>
        </ActionRow>
        <ActionRow says={`For bars the take adds, drops or repeats, within the same ${pass}.`}>
          <Button onClick={() => set({ bar, formBar, newPass: false })}>From bar {bar} the form goes on</Button>
          <Sentence label="Bar of the form">
            {'with its bar '}
            <SentenceNumber label="bar of the form" min={1} max={formLength} value={formBar} onChange={setFormBar} />
            {` of ${formLength}`}
          </Sentence>
        </ActionRow>
      </ActionRows>
      <Marks body={body} tune={tune} edits={edits} />
    </>
  )
}

function Marks({ body, tune, edits }: Pick<FormToolsProps, 'body' | 'edits'> & { tune: TuneHint }) {
  if (body.marks.length === 0)
    return <p className="border-t border-rule py-2.5 text-sm text-pencil">No place of the form is marked yet.</p>
  const form = createFormMap({ marks: body.marks, formLength: tune.formLength, cyclic: tune.cyclic })
  const says = ({ bar, formBar, newPass }: FormMark): string => {
    if (formBar === null) return `from bar ${bar} on, outside the form`
    const place = form.formPlaceOf(bar)
    const pass = place ? passWords(place.pass, tune.cyclic) : ''
    return newPass && formBar === 1
      ? `at bar ${bar} the ${pass} starts`
      : `bar ${bar} is bar ${formBar} of the form${pass ? `, ${pass}` : ''}`
  }
  return (
    <ul aria-label="Marks of the form" className="grid border-t border-rule py-1.5 md:grid-cols-2 md:gap-x-8">
      {body.marks.map((mark) => (
        <li key={mark.bar} className="flex items-center justify-between gap-3">
          <span>{says(mark)}</span>
          <Button
            look="quiet"
            aria-label={`Take out: ${says(mark)}`}
            onClick={() => edits.run((now) => attempt(now, { kind: 'removeMark', bar: mark.bar }))}
          >
            Take out
          </Button>
        </li>
      ))}
    </ul>
  )
}
