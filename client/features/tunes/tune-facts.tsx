import { useId, useState } from 'react'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits, type ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { TextField } from '@client/ui/text-field'
import { suggestedKeys, suggestedMeters } from '@client/features/tunes/key-names'
import { Suggestions } from '@client/features/tunes/suggestions'

interface TuneFactsProps {
  body: ChartBody
  /** Left out for those who may only read. */
  onEdit?: (operations: ChartOperation[]) => void
}

const tempoText = ({ tempo }: ChartBody): string => {
  if (!tempo) return ''
  return tempo.min === tempo.max ? String(tempo.min) : `${tempo.min} to ${tempo.max}`
}

/** `120`, `120-160`, `120 to 160`, or nothing. */
export const readTempo = (text: string): { ok: true; tempo: ChartBody['tempo'] } | { ok: false } => {
  if (text.trim() === '') return { ok: true, tempo: null }
  const match = /^\s*(\d{1,3})(?:\s*(?:-|–|to|,)\s*(\d{1,3}))?\s*$/u.exec(text)
  if (!match) return { ok: false }
  const [min, max] = [Number(match[1]), Number(match[2] ?? match[1])]
  const isSaid = [min, max].every((beats) => beats >= chartLimits.tempoMin && beats <= chartLimits.tempoMax)
  return isSaid ? { ok: true, tempo: { min, max } } : { ok: false }
}

const tempoFault = `One tempo or two, such as 120 to 160, from ${chartLimits.tempoMin} to ${chartLimits.tempoMax}`

const operationFor = {
  key: (text: string): ChartOperation => ({ kind: 'setKey', key: text }),
  meter: (text: string): ChartOperation => ({ kind: 'setMeter', meter: text }),
  tempo: (text: string): ChartOperation | null => {
    const read = readTempo(text)
    return read.ok ? { kind: 'setTempo', tempo: read.tempo } : null
  }
}

/** Key, meter and tempo range: each kept when its field is left, a fault named below it. */
export function TuneFacts({ body, onEdit }: TuneFactsProps) {
  if (!onEdit)
    return (
      <p>
        {[body.key || 'No key written', body.meter, body.tempo && `${tempoText(body)} beats a minute`]
          .filter(Boolean)
          .join(' · ')}
      </p>
    )
  return (
    <div className="grid gap-3 sm:grid-cols-3">
      <Fact
        label="Key"
        hint="Any key: G minor, B♭, D dorian"
        value={body.key}
        suggestions={suggestedKeys}
        maxLength={chartLimits.key}
        fact="key"
        body={body}
        onEdit={onEdit}
      />
      <Fact
        label="Meter"
        value={body.meter}
        suggestions={suggestedMeters}
        maxLength={chartLimits.meter}
        fact="meter"
        body={body}
        onEdit={onEdit}
      />
      <Fact
        label="Beats a minute"
        hint="One tempo, or from slow to fast"
        value={tempoText(body)}
        maxLength={20}
        fact="tempo"
        body={body}
        onEdit={onEdit}
      />
    </div>
  )
}

interface FactProps {
  label: string
  hint?: string
  value: string
  suggestions?: readonly string[]
  maxLength: number
  fact: keyof typeof operationFor
  body: ChartBody
  onEdit: (operations: ChartOperation[]) => void
}

function Fact({ label, hint, value, suggestions, maxLength, fact, body, onEdit }: FactProps) {
  const [draft, setDraft] = useState<string | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const id = useId()
  const keep = (): void => {
    if (draft === null) return
    const text = draft.trim()
    const operation = text === value ? null : operationFor[fact](text)
    if (text !== value && !operation) return setFault(tempoFault)
    const tried = operation ? chartDocument.apply(body, operation) : null
    if (tried && !tried.ok) return setFault(tried.error.message)
    setFault(null)
    setDraft(null)
    if (operation) onEdit([operation])
  }
  return (
    <div>
      <TextField
        label={label}
        hint={hint}
        fault={fault}
        value={draft ?? value}
        maxLength={maxLength}
        autoComplete="off"
        spellCheck={false}
        {...(suggestions ? { list: id } : {})}
        onChange={(event) => setDraft(event.target.value)}
        onBlur={keep}
        onKeyDown={(event) => {
          if (event.key === 'Enter') {
            event.preventDefault()
            keep()
          } else if (event.key === 'Escape') {
            setDraft(null)
            setFault(null)
          }
        }}
      />
      {suggestions ? <Suggestions id={id} values={suggestions} /> : null}
    </div>
  )
}
