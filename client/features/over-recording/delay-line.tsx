import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import type { MachineDelay } from './use-capture'

export interface DelayLineProps {
  delay: MachineDelay
  isMeasuring: boolean
  fault: string | null
  onMeasure: () => void
}

const ms = (sec: number): string => `${Math.round(sec * 1000)} ms`

/** How long the machine takes from the note in the headphones to the note in the recording, and how that is known. */
export function DelayLine({ delay, isMeasuring, fault, onMeasure }: DelayLineProps) {
  return (
    <div className="grid gap-2">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <p role="status" className="min-w-0 flex-1 basis-64">
          {isMeasuring ? (
            'Listening for the signal: five short chirps.'
          ) : delay.isMeasured ? (
            <>This machine is {ms(delay.delaySec)} late, as measured. So much is taken out of what you record.</>
          ) : (
            <>
              This machine is roughly {ms(delay.delaySec)} late, by the browser’s own account, which may be far off.
              Measured once, what you record lies where you played it.
            </>
          )}
        </p>
        <Button busy={isMeasuring} onClick={onMeasure}>
          {delay.isMeasured ? 'Measure again' : 'Measure this machine'}
        </Button>
      </div>
      <p className="max-w-prose text-sm text-pencil">
        To measure, hold one side of the headphones at the microphone, or let it sound over the loudspeakers for three
        seconds. It is kept in this browser for this input and output.
      </p>
      {fault ? <Notice kind="fault">{fault}</Notice> : null}
    </div>
  )
}
