import { useState } from 'react'
import { useMicrophone } from '@client/transport/microphone/use-microphone'
import type { Player } from '@client/transport/player'
import { usePlayhead } from '@client/transport/use-playhead'
import { Notice } from '@client/ui/notice'
import { limits } from '@shared/limits'
import { HeadphonesForm, type HeadphoneChoice } from './headphones-form'
import { MicrophonePart } from './microphone-part'
import type { OverRecordingProps, TryToKeep } from './over-recording'
import { loopOver, playedSpan, speedWords } from './played-words'
import { Running } from './running'
import { TryList, tryName } from './try-list'
import { browserTryStore, fileOfTry } from './try-store'
import { useCapture } from './use-capture'
import { useListening } from './use-listening'
import { useOverPlayer } from './use-over-player'
import { useOverRecorder } from './use-over-recorder'
import { useTries, type ListedTry } from './use-tries'

/** Moderate: a chirp is no music. */
const measureVolume = 0.7
const goneWords = 'A part of this try is missing in this browser.'

/** Headphones, microphone, delay, and the tries. */
export function AtTheTake(props: OverRecordingProps & { heard: Player }) {
  const { take, source, player: desk, heard, barMap, ownerId, selection, wordsFor, onBegin } = props
  const [chosen, setChosen] = useState<HeadphoneChoice>({
    hasTake: true,
    takeLevel: 0.8,
    hasClick: true,
    countIn: props.countIn === 'none' ? 'one bar' : props.countIn,
    where: 'round'
  })
  const [keeping, setKeeping] = useState<{ listed: ListedTry; file: File } | null>(null)
  const [sending, setSending] = useState<ReadonlySet<string>>(new Set())
  const [fault, setFault] = useState<string | null>(null)
  const microphone = useMicrophone()
  const input = useCapture(microphone.stream)
  const tries = useTries(ownerId, take.id)
  const listening = useListening()
  const overPlayer = useOverPlayer(heard, props)
  const recording = useOverRecorder({ ...props, overPlayer, onRecorded: tries.add })
  const deskSec = usePlayhead(desk)

  const span = selection && selection.endSec > selection.startSec ? selection : null
  const choice: HeadphoneChoice = { ...chosen, where: span ? chosen.where : 'here' }

  const handleRecord = (): void => {
    const { capture, delay } = input
    listening.stop()
    setFault(null)
    if (capture && delay)
      void recording.begin({ capture, delaySec: delay.delaySec, choice, span, firstNumber: tries.nextNumber })
  }
  const handleMeasure = (): void => {
    listening.stop()
    onBegin()
    overPlayer.forget()
    void input.measure(heard, measureVolume)
  }
  const handleListen = (listed: ListedTry): void => {
    onBegin()
    void listening.listen(listed, () => overPlayer.forListening(choice, listed.one.cut.rate))
  }
  const handleKeep = async (listed: ListedTry): Promise<void> => {
    listening.stop()
    setFault(null)
    const file = await fileOfTry(listed.recorded, listed.one, tryName(listed), browserTryStore)
    if (file) setKeeping({ listed, file })
    else setFault(goneWords)
  }
  const handleDrop = ({ one }: ListedTry): void => {
    if (listening.tryId === one.id) listening.stop()
    tries.drop(one.id)
  }
  const slotOf = ({ listed, file }: { listed: ListedTry; file: File }): TryToKeep => {
    const { id, cut } = listed.one
    const tail = ` · ${tryName(listed).toLowerCase()}`
    return {
      id,
      title: take.title.slice(0, limits.title - tail.length) + tail,
      file,
      over: { takeId: take.id, placeSec: cut.placeSec, rate: cut.rate },
      onKept: () => {
        setSending((now) => new Set([...now, id]))
        setKeeping(null)
      },
      onSent: () => tries.drop(id),
      onBack: () => setKeeping(null)
    }
  }

  const words = [fault, recording.lost, listening.fault].filter((each) => each !== null)
  return (
    <>
      {recording.recorder ? (
        <Running
          recorder={recording.recorder}
          stream={microphone.stream}
          player={heard}
          placeWords={(sec) => wordsFor({ startSec: sec, endSec: sec })}
        />
      ) : (
        <>
          <HeadphonesForm
            choice={choice}
            onChange={setChosen}
            hasBars={barMap !== null}
            selectionWords={span ? wordsFor(span) : null}
            hereWords={wordsFor({ startSec: deskSec, endSec: deskSec })}
            speedWords={speedWords(desk, choice.where === 'round' && span ? loopOver(span, desk.loop) : null)}
          />
          <MicrophonePart
            microphone={microphone}
            input={input}
            isPreparing={recording.isPreparing}
            onMeasure={handleMeasure}
            onRecord={handleRecord}
          />
        </>
      )}
      {words.map((each) => (
        <Notice key={each}>{each}</Notice>
      ))}
      {tries.listed.length > 0 ? (
        <TryList
          tries={tries.listed}
          placeWords={({ recorded, one }) => wordsFor(playedSpan(one.cut, recorded.sampleRate, source.durationSec))}
          heardId={listening.tryId}
          sending={sending}
          areBusy={recording.recorder !== null || input.isMeasuring || recording.isPreparing}
          onListen={handleListen}
          onPause={listening.stop}
          onKeep={(listed) => void handleKeep(listed)}
          onDrop={handleDrop}
        />
      ) : null}
      {keeping ? props.renderKeep(slotOf(keeping)) : null}
    </>
  )
}
