import { InputWords } from '@client/transport/microphone/input-words'
import { LevelBar } from '@client/transport/microphone/level-bar'
import type { Microphone } from '@client/transport/microphone/use-microphone'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { DelayLine } from './delay-line'
import { HeadphonesHint } from './headphones-hint'
import type { CaptureView } from './use-capture'

export interface MicrophonePartProps {
  microphone: Microphone
  input: CaptureView
  isPreparing: boolean
  onMeasure: () => void
  onRecord: () => void
}

/** From asking for the microphone to the button that records. */
export function MicrophonePart({ microphone, input, isPreparing, onMeasure, onRecord }: MicrophonePartProps) {
  const { stream } = microphone
  const faults = [microphone.fault, input.fault].filter((fault) => fault !== null)
  return (
    <>
      {faults.map((fault) => (
        <Notice key={fault} kind="fault">
          {fault}
        </Notice>
      ))}
      {stream ? (
        <>
          <div className="grid gap-2">
            <InputWords microphone={microphone} />
            <LevelBar stream={stream} />
          </div>
          {input.delay ? (
            <DelayLine
              delay={input.delay}
              isMeasuring={input.isMeasuring}
              fault={input.measureFault}
              onMeasure={onMeasure}
            />
          ) : null}
          <HeadphonesHint />
          <div>
            <Button
              look="primary"
              icon="microphone"
              busy={!input.capture || input.isMeasuring || isPreparing}
              onClick={onRecord}
            >
              Record
            </Button>
          </div>
        </>
      ) : (
        <div className="grid justify-items-start gap-3">
          <p className="max-w-prose text-sm text-pencil">
            The browser asks whether this page may hear you. Nothing is recorded before you press Record.
          </p>
          <Button look="primary" icon="microphone" busy={microphone.isAsking} onClick={() => microphone.open()}>
            Use the microphone
          </Button>
        </div>
      )}
    </>
  )
}
