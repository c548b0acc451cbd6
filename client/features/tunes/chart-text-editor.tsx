import { useId, useState } from 'react'
import { chartText, MAX_CHART_TEXT } from '@shared/music/chart-text'
import type { ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { TextArea } from '@client/ui/text-area'
import { BarFaults } from '@client/features/tunes/bar-faults'
import { barsFromText, chartFromText, textOfChart } from '@client/features/tunes/chart-from-text'

export interface ChartTextEditorProps {
  body: ChartBody
  /** One section only; left out for the whole chart. */
  sectionId?: string
  onEdit(operations: ChartOperation[]): void
  onClose(): void
}

interface Reading {
  faults: readonly { bar: number; message: string }[]
  operations: ChartOperation[]
  says: string
}

const counted = (count: number, noun: string): string => `${count} ${noun}${count === 1 ? '' : 's'}`

const readText = (body: ChartBody, sectionId: string | undefined, text: string): Reading => {
  if (sectionId === undefined) {
    const read = chartFromText(body, text, freshId)
    if (!read.ok) return { faults: read.error, operations: [], says: '' }
    const { sections } = read.value.body
    const bars = sections.reduce((sum, section) => sum + section.bars.length, 0)
    return {
      faults: [],
      operations: read.value.operations,
      says: `${counted(bars, 'bar')} in ${counted(sections.length, 'section')}`
    }
  }
  const read = barsFromText(body, text)
  if (!read.ok) return { faults: read.error, operations: [], says: '' }
  const before = body.sections.find(({ id }) => id === sectionId)?.bars ?? []
  const isSame = read.value.join('|') === before.join('|')
  return {
    faults: [],
    operations: isSame ? [] : [{ kind: 'setBars', sectionId, bars: read.value }],
    says: counted(read.value.length, 'bar')
  }
}

/** The chart, or a section, as text. A bar that cannot be read is named as soon as it stands there; the text stays. */
export function ChartTextEditor({ body, sectionId, onEdit, onClose }: ChartTextEditorProps) {
  const section = body.sections.find(({ id }) => id === sectionId)
  const [text, setText] = useState(() => (section ? chartText(section.bars) : textOfChart(body)))
  const id = useId()
  const { faults, operations, says } = readText(body, sectionId, text)
  const isEmpty = text.trim() === ''
  return (
    <div className="grid gap-3">
      <TextArea
        label={section ? `Bars of ${section.name}` : 'The whole chart'}
        hint={
          section
            ? 'Bars between bar lines: | Dm7 | Em7b5 A7 | % | N.C. |'
            : 'Bars between bar lines: | Dm7 | Em7b5 A7 | % | N.C. |, and a name such as [A] before each section. [A] alone plays A again.'
        }
        rows={Math.min(16, Math.max(6, text.split('\n').length + 1))}
        maxLength={MAX_CHART_TEXT}
        spellCheck={false}
        autoCapitalize="off"
        autoComplete="off"
        value={text}
        aria-invalid={faults.length > 0 && !isEmpty ? true : undefined}
        onChange={(event) => setText(event.target.value)}
      />
      <div id={id} role="status" className="min-h-5">
        {isEmpty ? null : faults.length > 0 ? (
          <BarFaults faults={faults} />
        ) : (
          <p className="text-sm text-pencil">{says}, all of them can be read.</p>
        )}
      </div>
      <div className="flex flex-wrap gap-2">
        <Button
          look="primary"
          aria-describedby={id}
          disabled={faults.length > 0}
          onClick={() => {
            if (operations.length > 0) onEdit(operations)
            onClose()
          }}
        >
          {section ? 'Keep these bars' : 'Keep this chart'}
        </Button>
        <Button look="quiet" onClick={onClose}>
          Leave it as it was
        </Button>
      </div>
    </div>
  )
}
