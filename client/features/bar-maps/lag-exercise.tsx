import { useRef, useState, type KeyboardEvent } from 'react'
import { LAG_TAPS, learnTapLag } from '@shared/timing/taps'
import type { Sec } from '@shared/units'
import { useScope } from '@client/lib/scope'
import { isWriting } from '@client/transport/keys'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { startClicks, type ClickTrack, type StartClicks } from '@client/features/bar-maps/click-track'
import { eventAgeSec, TapPad } from '@client/features/bar-maps/tap-pad'

export interface LagExerciseProps {
  onLearned(lagMs: number): void
  onClose(): void
  start?: StartClicks
}

/** Taps that are needed: the first few are for finding the pulse. */
const wanted = LAG_TAPS + 4
const skipped = 2

export const lagWords = (lagMs: number): string => {
  const ms = Math.round(Math.abs(lagMs))
  if (ms < 5) return 'right on the sound'
  return `${ms} ms ${lagMs > 0 ? 'after' : 'before'} the sound`
}

/** Tap along with a click: what is late in hand, key and loudspeaker is measured and later taken off. */
export function LagExercise({ onLearned, onClose, start = startClicks }: LagExerciseProps) {
  const [state, setState] = useState<'ready' | 'running' | 'silent' | 'unsteady'>('ready')
  const [taps, setTaps] = useState<readonly Sec[]>([])
  const clicks = useRef<ClickTrack | null>(null)
  useScope((scope) => {
    scope.add(() => clicks.current?.stop())
  }, [])

  const begin = async (): Promise<void> => {
    clicks.current?.stop()
    clicks.current = await start()
    setTaps([])
    setState(clicks.current ? 'running' : 'silent')
  }
  const tap = (ageSec: Sec): void => {
    const track = clicks.current
    if (!track || state !== 'running') return
    const now = [...taps, track.now() - ageSec]
    setTaps(now)
    if (now.length < wanted) return
    track.stop()
    const learned = learnTapLag(now.slice(skipped), track.beats, 1)
    if (learned && learned.spreadSec < 0.08) {
      onLearned(Math.round(learned.lagSec * 1000))
      onClose()
    } else setState('unsteady')
  }
  const handleKey = (event: KeyboardEvent): void => {
    if (event.key.toLowerCase() !== 't' || event.repeat || event.ctrlKey || event.metaKey || isWriting(event.target))
      return
    event.preventDefault()
    tap(eventAgeSec(event.timeStamp, performance.now()))
  }
  return (
    // Keys count anywhere in the exercise; the pad is the control.
    // oxlint-disable-next-line jsx-a11y/no-static-element-interactions
    <div className="grid gap-3" onKeyDown={handleKey}>
      <p className="max-w-prose">
        Twenty clicks will sound, 100 a minute. Tap with each of them: the pad, T or the space bar. What your hand, the
        key and the loudspeaker add is taken off your taps from then on.
      </p>
      {state === 'silent' ? (
        <Notice kind="fault">This browser gives no sound here, so your lag cannot be measured.</Notice>
      ) : null}
      {state === 'unsteady' ? (
        <Notice kind="fault">These taps lie too far apart to tell. Try again, a little more calmly.</Notice>
      ) : null}
      {state === 'running' ? (
        <>
          <TapPad label="Tap with the click" onTap={tap} />
          <p role="status">
            {taps.length} of {wanted} taps
          </p>
        </>
      ) : null}
      <div className="flex flex-wrap gap-2">
        {state === 'running' ? null : (
          <Button look="primary" icon="play" onClick={() => void begin()}>
            {state === 'ready' ? 'Start the click' : 'Start again'}
          </Button>
        )}
        <Button look="quiet" onClick={onClose}>
          Leave it
        </Button>
      </div>
    </div>
  )
}
