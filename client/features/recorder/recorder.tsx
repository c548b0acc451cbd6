import { useEffect, useState, useSyncExternalStore, type ReactNode } from 'react'
import type { Take } from '@shared/contracts/takes'
import { timeWords } from '@shared/timing/time-words'
import { useScope } from '@client/lib/scope'
import { InputWords } from '@client/transport/microphone/input-words'
import { LevelBar } from '@client/transport/microphone/level-bar'
import { missingForRecording } from '@client/transport/microphone/microphone'
import { useMicrophone } from '@client/transport/microphone/use-microphone'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Sheet } from '@client/ui/sheet'
import { useFinish, useThrowAway, type KeepWords } from './finish'
import { ListenBack } from './listen-back'
import type { SenderView } from './piece-sender'
import { startRecording, type Recording } from './recording'

export interface KeepSlot {
  isBusy: boolean
  fault: string | null
  onKeep: (words: KeepWords) => void
  onBack: () => void
}

export interface RecorderProps {
  /** Null where nothing can be sent while recording: the recording then becomes a file of this browser. */
  owner: { ownerId: string; groupId: string } | null
  /** Which group it is for; shown until recording begins. */
  groupChoice?: ReactNode
  renderKeep: (slot: KeepSlot) => ReactNode
  onKept: (take: Take) => void
  onFile: (file: File, durationSec: number) => void
}

/** Records in the browser: level, pause, listen, once more, keep. */
export function Recorder(props: RecorderProps) {
  const missing = missingForRecording()
  if (missing) {
    return (
      <Notice kind="fault" title="Nothing can be recorded here">
        {missing}
      </Notice>
    )
  }
  return <AtTheMicrophone {...props} />
}

function AtTheMicrophone(props: RecorderProps) {
  const microphone = useMicrophone()
  const [recording, setRecording] = useState<Recording | null>(null)
  useEffect(() => () => recording?.dispose(), [recording])
  const { stream, channels } = microphone
  const begin = () => {
    if (stream) setRecording(startRecording({ stream, channels, owner: props.owner }))
  }
  if (recording) {
    return (
      <OneRecording
        {...props}
        key={recording.id}
        recording={recording}
        stream={stream}
        onAgain={() => setRecording(null)}
      />
    )
  }
  return (
    <Sheet>
      <div className="grid gap-4">
        {microphone.fault ? <Notice kind="fault">{microphone.fault}</Notice> : null}
        {props.groupChoice}
        {stream ? <InputWords microphone={microphone} /> : null}
        {stream ? <LevelBar stream={stream} /> : null}
        {stream ? (
          <div>
            <Button look="primary" icon="microphone" onClick={begin}>
              Record
            </Button>
          </div>
        ) : (
          <>
            <p className="max-w-prose text-pencil">
              The browser asks whether this page may hear you. Nothing is recorded before you press Record.
            </p>
            <div>
              <Button look="primary" icon="microphone" busy={microphone.isAsking} onClick={() => microphone.open()}>
                Use the microphone
              </Button>
            </div>
          </>
        )}
      </div>
    </Sheet>
  )
}

interface OneProps extends RecorderProps {
  recording: Recording
  stream: MediaStream | null
  onAgain: () => void
}

function OneRecording({ recording, stream, owner, renderKeep, onKept, onFile, onAgain }: OneProps) {
  const { state, fault } = useSyncExternalStore(recording.subscribe, recording.view)
  const [step, setStep] = useState<'hear' | 'keep'>('hear')
  const [isBusy, setBusy] = useState(false)
  const [keepFault, setKeepFault] = useState<string | null>(null)
  const finish = useFinish()
  const throwAway = useThrowAway()
  const { sender } = recording
  const isRunning = state === 'recording' || state === 'paused'

  const keep = async (words: KeepWords): Promise<void> => {
    if (!sender) return
    setBusy(true)
    setKeepFault(null)
    try {
      const take = await finish(recording.id, recording.pieces(), sender, words)
      await recording.forget()
      onKept(take)
    } catch (error) {
      setKeepFault(error instanceof Error ? error.message : 'It could not be kept. Try again.')
      setBusy(false)
    }
  }
  const again = async (): Promise<void> => {
    await recording.forget()
    void throwAway({ id: recording.id, groupId: owner?.groupId ?? null })
    onAgain()
  }
  const handOver = async (): Promise<void> => {
    const [file, lengthSec] = [recording.file(), recording.lengthSec()]
    await recording.forget()
    onFile(file, lengthSec)
  }

  return (
    <Sheet>
      <div className="grid gap-4">
        {fault ? <Notice kind="fault">{fault}</Notice> : null}
        {isRunning && stream ? <LevelBar stream={stream} /> : null}
        <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
          <span role="status" className="font-semibold">
            {stateWords[state]}
          </span>
          <RunningTime recording={recording} />
        </div>
        {sender ? (
          <WayWords recording={recording} isRunning={isRunning} />
        ) : (
          <p className="text-sm text-pencil">It stays in this browser until you keep it.</p>
        )}
        {isRunning ? (
          <div className="flex flex-wrap gap-3">
            <Button look="primary" onClick={() => void recording.stop()}>
              Stop
            </Button>
            {state === 'paused' ? (
              <Button icon="microphone" onClick={recording.resume}>
                Go on recording
              </Button>
            ) : (
              <Button icon="pause" onClick={recording.pause}>
                Pause
              </Button>
            )}
          </div>
        ) : null}
        {state === 'stopped' && step === 'hear' ? (
          <>
            <WholeFile recording={recording} />
            <div className="flex flex-wrap gap-3">
              <Button
                look="primary"
                onClick={() => (sender && sender.view().way !== 'refused' ? setStep('keep') : void handOver())}
              >
                {sender ? 'Keep it' : 'Loop it, slow it, keep it'}
              </Button>
              <Button look="quiet" icon="bin" onClick={() => void again()}>
                Throw it away and record again
              </Button>
            </div>
          </>
        ) : null}
        {state === 'stopped' && step === 'keep'
          ? renderKeep({ isBusy, fault: keepFault, onKeep: (words) => void keep(words), onBack: () => setStep('hear') })
          : null}
      </div>
    </Sheet>
  )
}

const stateWords = {
  recording: 'Recording',
  paused: 'Paused',
  stopping: 'Storing the last notes …',
  stopped: 'Recorded'
}

function RunningTime({ recording }: { recording: Recording }) {
  const [sec, setSec] = useState(0)
  useScope((scope) => void scope.interval(() => setSec(recording.lengthSec()), 200), [recording])
  return <span className="font-figures text-xl">{timeWords(sec)}</span>
}

function WholeFile({ recording }: { recording: Recording }) {
  const [whole] = useState(() => ({ file: recording.file(), lengthSec: recording.lengthSec() }))
  return <ListenBack file={whole.file} durationSec={whole.lengthSec} />
}

const noSender: SenderView = { sent: 0, made: 0, way: 'open', fault: null }
const idle = () => () => undefined

/** How much of it the server has. */
function WayWords({ recording: { sender }, isRunning }: { recording: Recording; isRunning: boolean }) {
  const { sent, made, way, fault } = useSyncExternalStore(sender?.subscribe ?? idle, sender?.view ?? (() => noSender))
  if (way === 'refused')
    return (
      <Notice kind="fault">
        {fault} What you record stays in this browser; when you keep it, it is sent as a file.
      </Notice>
    )
  return (
    <p role="status" className="text-sm text-pencil">
      {way === 'offline'
        ? 'The server cannot be reached. The recording is kept on this computer and sent when it can be.'
        : isRunning
          ? sent >= made - 1
            ? 'It is stored on the server while you play.'
            : 'The server is a little behind; nothing is lost.'
          : sent >= made
            ? 'All of it is on the server.'
            : 'The last of it is on its way to the server.'}
    </p>
  )
}
