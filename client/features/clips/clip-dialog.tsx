// A passage as it is heard now, kept as a file. The server makes it; the dialog can be left and come back to.
import { useRef, useState } from 'react'
import type { ClipSettings } from '@shared/contracts/clips'
import { clipSec } from '@shared/audio/clips/plan-clip'
import { limits } from '@shared/limits'
import type { ClickGrid } from '@shared/practice/click-pattern'
import { clipWords } from '@shared/practice/clip-words'
import type { BarMap } from '@shared/timing/bar-map'
import type { Span } from '@shared/timing/types'
import { Button } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { RadioGroup } from '@client/ui/radio-group'
import { useClipActs, useClips } from './api'
import { ClipRow } from './clip-row'

/** How the passage sounds at the desk now. */
export interface ClipPassage extends Pick<ClipSettings, 'span' | 'rate' | 'semitones' | 'aids'> {
  /** The click as it is set, whether it is on or not. */
  click: ClickGrid
  clickLevel: number
  isClickOn: boolean
  countIn: ClipSettings['countIn']
}

export interface ClipDialogProps {
  takeId: string
  barMap: BarMap | null
  /** The loop that is on, or the selection. Null where there is neither. */
  passage: ClipPassage | null
  /** "bars 17 to 20, 2nd chorus". */
  wordsFor: (span: Span) => string
  onClose: () => void
}

const formats: { value: ClipSettings['format']; label: string; note: string }[] = [
  { value: 'wav', label: 'WAV', note: 'nothing lost; for an editor or a recorder' },
  { value: 'm4a', label: 'M4A', note: 'a sixth of the size or less; for a phone' }
]
const countIns: { value: ClipSettings['countIn']; label: string }[] = [
  { value: 'none', label: 'No count-in' },
  { value: 'one bar', label: 'One bar' },
  { value: 'two bars', label: 'Two bars' }
]

export function ClipDialog({ takeId, barMap, passage, wordsFor, onClose }: ClipDialogProps) {
  const list = useClips(takeId)
  const acts = useClipActs(takeId)
  const kept = useRef<HTMLElement>(null)
  const clips = list.data?.items ?? []
  const fault = acts.fault ?? list.error

  return (
    <Dialog
      title="Keep this passage as a file"
      onClose={onClose}
      actions={
        <Button look="quiet" onClick={onClose}>
          Close
        </Button>
      }
    >
      <div className="grid gap-6">
        {fault ? <Notice kind="fault">{fault.fields[0]?.message ?? fault.message}</Notice> : null}
        {passage ? (
          <OrderForm {...{ passage, barMap, wordsFor }} isAsking={acts.isAsking} onMake={acts.make} />
        ) : (
          <p>Select bars, or put a loop on, to keep them as a file.</p>
        )}
        {clips.length > 0 ? (
          <section ref={kept} tabIndex={-1} aria-label="Your files of this take">
            <h3 className="pb-2 font-semibold">Your files of this take</h3>
            <ul className="grid border-b border-rule">
              {clips.map((clip) => (
                <ClipRow
                  key={clip.id}
                  clip={clip}
                  words={clipWords(clip.settings, barMap).join(' · ')}
                  onRemove={() => {
                    acts.remove(clip.id)
                    // The button that was pressed is gone with its row.
                    kept.current?.focus()
                  }}
                />
              ))}
            </ul>
            <p className="pt-2 text-sm text-pencil">
              Only you see them. They go on being made when you close this, and are kept {limits.clipDays} days.
            </p>
          </section>
        ) : null}
      </div>
    </Dialog>
  )
}

type OrderFormProps = Pick<ClipDialogProps, 'barMap' | 'wordsFor'> & {
  passage: ClipPassage
  isAsking: boolean
  onMake: (settings: ClipSettings, place: string) => void
}

function OrderForm({ passage, barMap, wordsFor, isAsking, onMake }: OrderFormProps) {
  const [format, setFormat] = useState<ClipSettings['format']>('m4a')
  const [hasClick, setClick] = useState(passage.isClickOn)
  const [countIn, setCountIn] = useState(passage.countIn)
  const { span, rate, semitones, aids, click, clickLevel } = passage
  const settings: ClipSettings = {
    span,
    rate,
    semitones,
    aids,
    click: barMap && hasClick ? click : null,
    clickLevel,
    countIn: barMap ? countIn : 'none',
    format
  }
  const isTooLong = clipSec(settings, barMap) > limits.clipSec
  return (
    <form
      className="grid gap-4"
      onSubmit={(event) => {
        event.preventDefault()
        if (!isTooLong && !isAsking) onMake(settings, wordsFor(span))
      }}
    >
      <div>
        <p className="font-semibold">{wordsFor(span)}</p>
        <p className="text-pencil">{clipWords(settings, barMap).join(' · ')}</p>
      </div>
      {barMap ? (
        <>
          <Checkbox label="With the click" checked={hasClick} onChange={setClick} />
          <RadioGroup legend="Before it" value={countIn} choices={countIns} onChange={setCountIn} inline />
        </>
      ) : null}
      <RadioGroup legend="Kind of file" value={format} choices={formats} onChange={setFormat} />
      {isTooLong ? (
        <p className="text-sm text-fault">
          A file lasts {limits.clipSec / 60} minutes at most. Select fewer bars, or play them faster.
        </p>
      ) : null}
      <div>
        <Button type="submit" look="primary" icon="download" busy={isAsking} disabled={isTooLong}>
          Make the file
        </Button>
      </div>
    </form>
  )
}
