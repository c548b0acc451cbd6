// The microphone as samples with their place in time. MediaRecorder is of no use here: it does not say when its first sample
// was taken, its encoder adds silence of its own and it may drop or stretch; a take laid under the bars of another needs
// every frame where the audio clock counted it, and nothing lost.
import { createScope } from '@client/lib/scope'
import { createOutputClock } from '@client/transport/engine/output-clock'
import type { Sec } from '@shared/units'
import moduleUrl from './capture-worklet.ts?worker&url'

export interface CapturedBlock {
  /** Frame of the capture's own clock. */
  frame: number
  channels: Float32Array[]
}

/** What records needs to know of the input; a stand-in in tests. */
export interface Capture {
  readonly sampleRate: number
  readonly channels: number
  /** Moment of the capture's clock that would be heard now, were it sound. */
  heard(): Sec
  /** The delay by the browser's own account: output, then input. Rough. */
  roughDelaySec(): Sec
  onBlock(listener: (block: CapturedBlock) => void): () => void
  /** The blocks so far, the last unfilled one too, have been told. */
  flush(): Promise<void>
  dispose(): void
}

/** Where the browser says nothing: a block of input as most systems take it. */
const usualInputSec = 0.01
/** How long the last bit may take to come. */
const flushPatienceMs = 500

type Told = ({ kind: 'block' } & CapturedBlock) | { kind: 'end' }

/** Rejects where worklets do not work. */
export const openCapture = async (stream: MediaStream): Promise<Capture> => {
  const scope = createScope()
  // At the device's own rate: a browser that cannot match two rates refuses the microphone otherwise.
  const context = new AudioContext({ latencyHint: 'interactive' })
  scope.add(() => void context.close().catch(() => undefined))
  const settings: MediaTrackSettings & { latency?: number } = stream.getAudioTracks()[0]?.getSettings() ?? {}
  const channels = (settings.channelCount ?? 1) >= 2 ? 2 : 1
  try {
    await context.audioWorklet.addModule(moduleUrl)
    if (context.state !== 'running') await context.resume()
  } catch (error) {
    scope.dispose()
    throw error
  }
  const source = context.createMediaStreamSource(stream)
  const node = new AudioWorkletNode(context, 'plumbline-capture', {
    numberOfInputs: 1,
    numberOfOutputs: 1,
    outputChannelCount: [1],
    channelCount: channels,
    channelCountMode: 'explicit',
    channelInterpretation: 'discrete'
  })
  source.connect(node)
  // It gives out silence; connected, so that every browser keeps it at work.
  node.connect(context.destination)
  const clock = createOutputClock(context)
  const listeners = new Set<(block: CapturedBlock) => void>()
  const ends = new Set<() => void>()
  const hear = (told: Told): void => {
    if (told.kind === 'end') for (const end of ends) end()
    else for (const listener of listeners) listener(told)
  }
  scope.listen(node.port, 'message', (event) => hear((event as MessageEvent<Told>).data))
  node.port.start()
  scope.add(() => {
    node.port.close()
    source.disconnect()
    node.disconnect()
  })
  scope.listen(context, 'statechange', clock.reset)
  return {
    sampleRate: context.sampleRate,
    channels,
    heard: clock.heard,
    roughDelaySec: () =>
      (context.outputLatency || context.baseLatency || 0) + (settings.latency || usualInputSec) + context.baseLatency,
    onBlock: (listener) => {
      listeners.add(listener)
      return () => void listeners.delete(listener)
    },
    flush: () =>
      new Promise((resolve) => {
        const done = (): void => {
          cancel()
          ends.delete(done)
          resolve()
        }
        const cancel = scope.timeout(done, flushPatienceMs)
        ends.add(done)
        node.port.postMessage('end', [])
      }),
    dispose: scope.dispose
  }
}
