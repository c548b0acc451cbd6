// Playing over a take in headphones, several tries, each of which may become a take under the same bars.
import { useEffect, useId, useState, type ReactNode } from 'react'
import { createPlayer } from '@client/transport/create-player'
import { missingForRecording } from '@client/transport/microphone/microphone'
import type { Player, PlayerSource } from '@client/transport/player'
import { IconButton } from '@client/ui/icon-button'
import { Notice } from '@client/ui/notice'
import type { PlayedOver, Take } from '@shared/contracts/takes'
import type { CountInChoice } from '@shared/practice/count-in'
import type { ClickSettings } from '@shared/practice/preferences'
import type { BarMap } from '@shared/timing/bar-map'
import type { Span } from '@shared/timing/types'
import { AtTheTake } from './at-the-take'

/** A try that is to be kept: what the take it becomes is made of. */
export interface TryToKeep {
  /** The take's id. */
  id: string
  title: string
  file: File
  over: PlayedOver
  /** It is on its way; the list says so. */
  onKept: () => void
  /** The server has it. */
  onSent: () => void
  onBack: () => void
}

export interface OverRecordingProps {
  take: Pick<Take, 'id' | 'title'>
  /** What the desk plays, as it was given to the desk's player. */
  source: PlayerSource
  /** The desk's player: it is only looked at (place, speed, pitch, aids, loop); the take in headphones has one of its own. */
  player: Player
  barMap: BarMap | null
  /** Who plays. */
  ownerId: string
  selection: Span | null
  /** "bars 17-20 of B" */
  wordsFor: (span: Span) => string
  click: ClickSettings
  countIn: CountInChoice
  /** Recording begins: the desk falls silent. */
  onBegin: () => void
  /** While true the desk's keys have to rest. */
  onRunning?: (isRunning: boolean) => void
  /** Asks what is said when a try is kept, and sends it. */
  renderKeep: (slot: TryToKeep) => ReactNode
  onClose: () => void
}

const elementWords =
  'Without the engine of this page nobody can tell to a few milliseconds what you heard when you played, so what you record could not be laid under the bars.'

/** What stands in the way, in words; null when nothing does. */
const missingHere = (): string | null =>
  missingForRecording({
    isSecureContext: window.isSecureContext,
    mediaDevices: navigator.mediaDevices,
    recorder: true
  })

export function OverRecording(props: OverRecordingProps) {
  const { onClose } = props
  const id = useId()
  const missing = missingHere()
  return (
    <section aria-labelledby={id} className="grid min-w-0 gap-4 border-t border-rule bg-sheet px-4 py-3 sm:px-5">
      <header className="flex items-center justify-between gap-4">
        <h2 id={id} className="min-w-0 text-base font-semibold break-words">
          Record over it
        </h2>
        <IconButton icon="close" label="Close Record over it" onClick={onClose} />
      </header>
      {missing ? (
        <Notice kind="fault" title="Nothing can be recorded here">
          {missing}
        </Notice>
      ) : (
        <WithPlayer {...props} />
      )}
    </section>
  )
}

/** A player of its own, so that nothing of the desk's has to be put back afterwards. */
function WithPlayer(props: OverRecordingProps) {
  const [made, setMade] = useState<{ player: Player; missing: string | null } | null>(null)
  useEffect(() => {
    const player = createPlayer({
      onMissing: (missing) => setMade((now) => (now && missing ? { ...now, missing } : now))
    })
    // Made in an effect, so that leaving and coming back (also as React's strict mode does it) makes a new one.
    // oxlint-disable-next-line react/set-state-in-effect
    setMade({ player, missing: null })
    return () => player.dispose()
  }, [])
  if (!made) return null
  const { player, missing } = made
  if (missing || !player.capabilities.schedule)
    return (
      <Notice kind="fault" title="Recording over a take is off here">
        {missing ? `${missing} ` : null}
        {elementWords}
      </Notice>
    )
  return <AtTheTake {...props} heard={player} />
}
