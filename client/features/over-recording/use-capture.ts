import { useCallback, useEffect, useState } from 'react'
import { createScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import { type Capture, openCapture } from './capture'
import { keepDelay, keptDelay, wayOf } from './delay-store'
import { measureDelay } from './measure-delay'

export interface MachineDelay {
  delaySec: Sec
  /** Otherwise it is the browser's own account. */
  isMeasured: boolean
}

export interface CaptureView {
  capture: Capture | null
  fault: string | null
  delay: MachineDelay | null
  isMeasuring: boolean
  /** What the last measuring came to, when it came to nothing. */
  measureFault: string | null
  measure(player: Player, volume: number): Promise<void>
}

const unfitWords = 'This browser cannot record sample by sample (it has no audio worklets that work here).'
const notFoundWords =
  'The signal was not heard. Turn the sound up a little, hold one side of the headphones right at the microphone, and measure once more.'

/** The input as samples for as long as its stream is there, and the delay of the way in and out that is in use. */
export const useCapture = (stream: MediaStream | null): CaptureView => {
  const [opened, setOpened] = useState<{ stream: MediaStream; capture: Capture } | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const [way, setWay] = useState<string | null>(null)
  const [measured, setMeasured] = useState<{ way: string; delaySec: Sec } | null>(null)
  const [isMeasuring, setMeasuring] = useState(false)
  const [measureFault, setMeasureFault] = useState<string | null>(null)

  useEffect(() => {
    if (!stream) return undefined
    const scope = createScope()
    openCapture(stream).then(
      (capture) => {
        scope.add(capture.dispose)
        if (!scope.disposed) setOpened({ stream, capture })
      },
      () => scope.disposed || setFault(unfitWords)
    )
    const look = (): void =>
      void navigator.mediaDevices.enumerateDevices().then(
        (devices) => scope.disposed || setWay(wayOf(stream, devices)),
        () => undefined
      )
    look()
    scope.listen(navigator.mediaDevices, 'devicechange', look)
    return scope.dispose
  }, [stream])

  const capture = opened && opened.stream === stream ? opened.capture : null
  const measure = useCallback(
    async (player: Player, volume: number): Promise<void> => {
      if (!capture || way === null) return
      setMeasuring(true)
      setMeasureFault(null)
      try {
        const found = await measureDelay(player, capture, volume)
        if (!found) return setMeasureFault(notFoundWords)
        keepDelay(way, { delaySec: found.delaySec, measuredMs: Date.now() })
        setMeasured({ way, delaySec: found.delaySec })
      } finally {
        setMeasuring(false)
      }
    },
    [capture, way]
  )
  const known = way === null ? null : measured?.way === way ? measured.delaySec : (keptDelay(way)?.delaySec ?? null)
  return {
    capture,
    fault,
    delay: capture && {
      delaySec: known ?? capture.roughDelaySec(),
      isMeasured: known !== null
    },
    isMeasuring,
    measureFault,
    measure
  }
}
