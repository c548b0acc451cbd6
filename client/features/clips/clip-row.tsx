import type { Clip } from '@shared/contracts/clips'
import { Button, buttonClass } from '@client/ui/button'
import { Icon } from '@client/ui/icon'
import { IconButton } from '@client/ui/icon-button'
import { Progress } from '@client/ui/progress'
import { clipUrl } from './api'

export interface ClipRowProps {
  clip: Clip
  /** What is in it: "60 % speed · 0:42.0 long". */
  words: string
  onRemove: () => void
}

const dayOf = (instant: string): string =>
  new Date(instant).toLocaleDateString('en-GB', { day: 'numeric', month: 'long' })

/** One file: being made, ready to be fetched, or not made after all. */
export function ClipRow({ clip, words, onRemove }: ClipRowProps) {
  const { fileName, state, stage, progress, fault, expiresAt } = clip
  return (
    <li className="grid gap-2 border-t border-rule py-3">
      <div className="flex items-start justify-between gap-3">
        <div className="min-w-0">
          <p className="font-semibold break-words">{fileName}</p>
          <p className="text-sm text-pencil">{words}</p>
        </div>
        {state === 'ready' || state === 'failed' ? (
          <IconButton icon="bin" label={`Delete “${fileName}”`} onClick={onRemove} />
        ) : null}
      </div>
      {state === 'ready' ? (
        <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
          <a className={buttonClass('plain')} href={clipUrl(clip.id)} download={fileName}>
            <Icon name="download" size={18} />
            Download<span className="sr-only"> “{fileName}”</span>
          </a>
          <p className="text-sm text-pencil">Kept until {dayOf(expiresAt)}</p>
        </div>
      ) : state === 'failed' ? (
        <p className="text-sm text-fault">{fault}</p>
      ) : (
        <Progress
          stage={stage ?? 'Waiting its turn'}
          percent={state === 'working' ? progress * 100 : null}
          action={
            <Button look="quiet" aria-label={`Stop making “${fileName}”`} onClick={onRemove}>
              Stop
            </Button>
          }
        />
      )}
    </li>
  )
}
