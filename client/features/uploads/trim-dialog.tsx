import { useRef, useState } from 'react'
import { timeWords } from '@shared/timing/time-words'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { useScope } from '@client/lib/scope'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { Progress } from '@client/ui/progress'
import { RadioGroup } from '@client/ui/radio-group'
import { TextField } from '@client/ui/text-field'
import { bytesWords } from './bytes-words'
import { plannedBytes, readTime, trimFault, trimFormats, type TrimFormat } from './trim-plan'

export interface TrimDialogProps {
  file: File
  /** null while it is not known. */
  durationSec: Sec | null
  /** What was selected while listening. */
  span: Span | null
  onDone: (trimmed: File) => void
  onClose: () => void
}

const choices = Object.entries(trimFormats).map(([value, { label, note }]) => ({
  value: value as TrimFormat,
  label,
  note
}))

/** Cuts a recording from one moment to another and makes it smaller, before anything is sent. */
export function TrimDialog({ file, durationSec, span, onDone, onClose }: TrimDialogProps) {
  const [startText, setStart] = useState(timeWords(span?.startSec ?? 0))
  const [endText, setEnd] = useState(span || durationSec ? timeWords(span?.endSec ?? durationSec ?? 0) : '')
  const [format, setFormat] = useState<TrimFormat>('opus')
  const [work, setWork] = useState<{ stage: string; percent: number | null } | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const [isChecked, setChecked] = useState(false)
  const abort = useRef<AbortController | null>(null)
  useScope((scope) => void scope.add(() => abort.current?.abort()), [])

  const startSec = readTime(startText)
  // An end that was left empty is the recording's own.
  const endSec = endText.trim() === '' ? Infinity : readTime(endText)
  const timeFault = trimFault(startSec, endSec, durationSec)
  const isWhole =
    startSec === 0 && (endSec === Infinity || (durationSec !== null && (endSec ?? 0) >= durationSec - 0.05))
  const lengthSec = Math.min(endSec ?? 0, durationSec ?? Infinity) - (startSec ?? 0)

  const handleTrim = async (): Promise<void> => {
    setChecked(true)
    if (timeFault !== null || startSec === null || endSec === null) return
    setFault(null)
    setWork({ stage: 'Loading the trimmer', percent: null })
    const own = new AbortController()
    abort.current = own
    try {
      const { trimFile } = await import('./trimmer')
      const last = endSec === Infinity ? 12 * 3600 : endSec
      const plan = { span: isWhole ? null : { startSec, endSec: last }, format }
      const trimmed = await trimFile(file, plan, {
        onLoaded: () => setWork({ stage: 'Cutting and shrinking', percent: 0 }),
        onProgress: (share) => setWork({ stage: 'Cutting and shrinking', percent: share * 100 }),
        signal: own.signal
      })
      onDone(trimmed)
    } catch (error) {
      if (own.signal.aborted) return
      setWork(null)
      setFault(error instanceof Error ? error.message : 'The recording could not be trimmed.')
    }
  }

  return (
    <Dialog
      title="Trim or shrink before sending"
      onClose={onClose}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            {work ? 'Stop' : 'Leave it as it is'}
          </Button>
          <Button look="primary" busy={work !== null} onClick={() => void handleTrim()}>
            {isWhole ? 'Shrink it' : 'Cut it'}
          </Button>
        </>
      }
    >
      <div className="grid gap-4">
        <p className="break-words">
          {file.name}, {bytesWords(file.size)}
          {durationSec ? `, ${timeWords(durationSec)}` : ''}. The file on your computer stays as it is.
        </p>
        <div className="grid grid-cols-2 gap-4">
          <TextField
            label="From"
            value={startText}
            inputMode="decimal"
            onChange={(event) => setStart(event.target.value)}
          />
          <TextField
            label="To"
            value={endText}
            inputMode="decimal"
            placeholder="the end"
            onChange={(event) => setEnd(event.target.value)}
          />
        </div>
        {isChecked && timeFault ? <Notice kind="fault">{timeFault}</Notice> : null}
        <RadioGroup legend="Written as" value={format} choices={choices} onChange={setFormat} />
        {Number.isFinite(lengthSec) && lengthSec > 0 ? (
          <p className="text-sm text-pencil">It will have about {bytesWords(plannedBytes(lengthSec, format))}.</p>
        ) : null}
        {work ? <Progress stage={work.stage} percent={work.percent} /> : null}
        {fault ? <Notice kind="fault">{fault}</Notice> : null}
        <p className="text-xs text-pencil">
          Done in your browser by FFmpeg, 32 MB that are loaded for it now. Licence GPL-2.0-or-later; source at{' '}
          <a href="https://github.com/ffmpegwasm/ffmpeg.wasm" rel="noreferrer" target="_blank">
            github.com/ffmpegwasm/ffmpeg.wasm
          </a>{' '}
          and{' '}
          <a href="https://ffmpeg.org/download.html" rel="noreferrer" target="_blank">
            ffmpeg.org
          </a>
          .
        </p>
      </div>
    </Dialog>
  )
}
