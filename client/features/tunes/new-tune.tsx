import { useId, useState } from 'react'
import type { Tune } from '@shared/contracts/tunes'
import { limits } from '@shared/limits'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits } from '@shared/music/chart-schema'
import { MAX_CHART_TEXT } from '@shared/music/chart-text'
import type { ChartBody } from '@shared/music/types'
import { checkKey, checkMeter } from '@shared/music/validate-chart'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Form } from '@client/ui/faults'
import { TextArea } from '@client/ui/text-area'
import { TextField } from '@client/ui/text-field'
import { useCreateTune } from '@client/features/tunes/api'
import { BarFaults } from '@client/features/tunes/bar-faults'
import { chartFromText } from '@client/features/tunes/chart-from-text'
import { suggestedKeys, suggestedMeters } from '@client/features/tunes/key-names'
import { Suggestions } from '@client/features/tunes/suggestions'

export interface NewTuneProps {
  groupId: string
  /** What stands in the title at first. */
  title?: string
  onCreated(tune: Tune): void
  onClose(): void
}

/** A title is enough; key, meter and chart can be written now or later. */
export function NewTune({ groupId, title: given = '', onCreated, onClose }: NewTuneProps) {
  const [title, setTitle] = useState(given)
  const [key, setKey] = useState('')
  const [meter, setMeter] = useState('4/4')
  const [text, setText] = useState('')
  const [tunePress] = useState(freshId)
  const [isAsked, setAsked] = useState(false)
  const formId = useId()
  const create = useCreateTune()

  const keyFault = faultOf(checkKey(key.trim()))
  const meterFault = faultOf(checkMeter(meter))
  const before: ChartBody = { ...chartDocument.empty, key: key.trim(), meter: meter.trim() }
  const hasText = text.trim() !== ''
  const read = hasText && !meterFault ? chartFromText(before, text, freshId) : null
  const titleFault = title.trim() === '' ? 'A tune needs a title.' : null

  const handleSubmit = (): void => {
    setAsked(true)
    if (titleFault || keyFault || meterFault || (read && !read.ok) || create.isPending) return
    const chart = read?.ok ? read.value.body : before
    create.mutate(
      // Pressing twice sends the same tune, not two.
      { params: { groupId }, body: { id: tunePress, title: title.trim(), chart } },
      { onSuccess: onCreated }
    )
  }
  return (
    <Dialog
      title="A new tune"
      onClose={onClose}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Not now
          </Button>
          <Button look="primary" type="submit" form={formId} busy={create.isPending}>
            Add the tune
          </Button>
        </>
      }
    >
      <Form
        id={formId}
        errors={create.error?.fields ?? null}
        fault={create.error?.message ?? null}
        onSubmit={handleSubmit}
      >
        <TextField
          label="Title"
          name="title"
          value={title}
          fault={isAsked ? titleFault : null}
          maxLength={limits.title}
          onChange={(event) => setTitle(event.target.value)}
        />
        <div className="grid gap-4 sm:grid-cols-2">
          <TextField
            label="Key"
            optional
            list={`${formId}-keys`}
            autoComplete="off"
            value={key}
            fault={key.trim() === '' ? null : keyFault}
            maxLength={chartLimits.key}
            onChange={(event) => setKey(event.target.value)}
          />
          <TextField
            label="Meter"
            list={`${formId}-meters`}
            autoComplete="off"
            value={meter}
            fault={meterFault}
            maxLength={chartLimits.meter}
            onChange={(event) => setMeter(event.target.value)}
          />
        </div>
        <Suggestions id={`${formId}-keys`} values={suggestedKeys} />
        <Suggestions id={`${formId}-meters`} values={suggestedMeters} />
        <div className="grid gap-1">
          <TextArea
            label="Chart"
            optional
            hint="Bars between bar lines: | Dm7 | Em7b5 A7 | % | N.C. |, and a name such as [A] before each section. [A] alone plays A again."
            rows={6}
            maxLength={MAX_CHART_TEXT}
            spellCheck={false}
            autoCapitalize="off"
            value={text}
            aria-invalid={read && !read.ok ? true : undefined}
            onChange={(event) => setText(event.target.value)}
          />
          <div role="status">{read && !read.ok ? <BarFaults faults={read.error} /> : null}</div>
        </div>
      </Form>
    </Dialog>
  )
}

const faultOf = (checked: ReturnType<typeof checkKey> | ReturnType<typeof checkMeter>): string | null =>
  checked.ok ? null : checked.error.message
