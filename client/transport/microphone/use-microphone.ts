import { useCallback, useEffect, useState } from 'react'
import { createScope } from '@client/lib/scope'
import { type InputChoice, listInputs, obeyedWords, openMicrophone, refusalWords } from './microphone'

export interface Microphone {
  stream: MediaStream | null
  isAsking: boolean
  fault: string | null
  inputs: readonly InputChoice[]
  inputId: string
  channels: number
  obeyed: { hasObeyed: boolean; words: string } | null
  /** Only from a click: the browser asks the person now. */
  open(inputId?: string): void
}

const stop = (stream: MediaStream | null): void => stream?.getTracks().forEach((track) => track.stop())

/** The microphone while the recorder is on the screen; let go of when it leaves. */
export const useMicrophone = (): Microphone => {
  const [stream, setStream] = useState<MediaStream | null>(null)
  const [isAsking, setAsking] = useState(false)
  const [fault, setFault] = useState<string | null>(null)
  const [inputs, setInputs] = useState<readonly InputChoice[]>([])
  useEffect(() => () => stop(stream), [stream])
  useEffect(() => {
    if (!stream) return undefined
    const scope = createScope()
    const look = (): void => void listInputs().then((found) => scope.disposed || setInputs(found))
    look()
    scope.listen(navigator.mediaDevices, 'devicechange', look)
    const track = stream.getAudioTracks()[0]
    if (track) {
      scope.listen(track, 'ended', () => {
        setFault('The input went away. Plug it in again, or choose another one.')
        setStream(null)
      })
    }
    return scope.dispose
  }, [stream])

  const open = useCallback((inputId?: string): void => {
    setAsking(true)
    setFault(null)
    openMicrophone(inputId ?? null)
      .then(setStream, (error: unknown) => setFault(refusalWords(error)))
      .finally(() => setAsking(false))
  }, [])
  const settings = stream?.getAudioTracks()[0]?.getSettings() ?? null
  return {
    stream,
    isAsking,
    fault,
    inputs,
    inputId: settings?.deviceId ?? '',
    channels: settings?.channelCount ?? 1,
    obeyed: settings ? obeyedWords(settings) : null,
    open
  }
}
