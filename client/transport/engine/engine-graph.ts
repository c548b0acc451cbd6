// The audio context with the engine's worklet in it, and everything that browsers do to audio contexts.
import { createScope } from '@client/lib/scope'
import type { FromWorklet, ToWorklet } from '@shared/audio/playback/messages'
import moduleUrl from './engine-worklet.ts?worker&url'
import { createOutputClock, type OutputClock } from './output-clock'
import { engineRate } from './take-sound'

/** Longer than this no module takes to load; a policy that blocks it may say nothing at all. */
const modulePatienceMs = 10_000
/** How long a browser may take to let sound out. */
const resumePatienceMs = 400
/** A running context whose time stands still this long has lost its device. */
const stallMs = 2000

export interface EngineGraph {
  readonly context: AudioContext
  readonly clock: OutputClock
  post(message: ToWorklet, handOver?: Transferable[]): void
  /** Asks the browser to let sound out; false when it wants a tap first. */
  resume(): Promise<boolean>
  /** Nothing will be heard for a while: the device may sleep. */
  rest(): void
  dispose(): void
}

export interface GraphEvents {
  onMessage(message: FromWorklet): void
  /** The system has taken the sound away (a call, a policy); it did not come back by itself. */
  onSilenced(): void
  /** Broken beyond mending: a new graph is needed. */
  onBroken(): void
}

/** Stretching works in bursts, which a larger buffer takes in; what is told of places allows for its delay. */
const latencyHint = 'playback'

const makeContext = (): AudioContext => {
  try {
    return new AudioContext({ latencyHint, sampleRate: engineRate })
  } catch {
    // At another rate the worklet matches the streams.
    return new AudioContext({ latencyHint })
  }
}

/** Rejects where worklets do not work. */
export const openEngineGraph = async ({ onMessage, onSilenced, onBroken }: GraphEvents): Promise<EngineGraph> => {
  const scope = createScope()
  const context = makeContext()
  scope.add(() => void context.close().catch(() => undefined))
  try {
    await Promise.race([
      context.audioWorklet.addModule(moduleUrl),
      new Promise((_, refuse) => scope.timeout(() => refuse(new Error('The worklet did not load')), modulePatienceMs))
    ])
  } catch (error) {
    scope.dispose()
    throw error
  }
  const node = new AudioWorkletNode(context, 'plumbline-engine', {
    numberOfInputs: 0,
    numberOfOutputs: 1,
    outputChannelCount: [2]
  })
  node.connect(context.destination)
  scope.add(() => {
    node.port.close()
    node.disconnect()
  })
  scope.listen(node.port, 'message', (event) => onMessage((event as MessageEvent<FromWorklet>).data))
  node.port.start()
  const clock = createOutputClock(context)
  let isResting = true

  const waitForRunning = (): Promise<boolean> =>
    Promise.race([
      context.resume().then(
        () => true,
        () => false
      ),
      new Promise<boolean>((resolve) => scope.timeout(() => resolve(false), resumePatienceMs))
    ]).then(() => context.state === 'running')

  scope.listen(node, 'processorerror', onBroken)
  scope.listen(context, 'error', onBroken)
  scope.listen(context, 'statechange', () => {
    clock.reset()
    if (isResting || context.state === 'running') return
    if (context.state === 'closed') return onBroken()
    void waitForRunning().then((isOut) => {
      if (!isOut && !isResting && !scope.disposed) onSilenced()
    })
  })
  // Another device has another delay, and may have taken the old stream with it.
  const watchStall = (): void => {
    clock.reset()
    const before = context.currentTime
    scope.timeout(() => {
      if (context.state === 'running' && context.currentTime === before) onBroken()
    }, stallMs)
  }
  scope.listen(context, 'sinkchange', watchStall)
  const devices: MediaDevices | undefined = navigator.mediaDevices
  if (devices) scope.listen(devices, 'devicechange', watchStall)
  scope.listen(document, 'visibilitychange', () => {
    if (document.visibilityState === 'visible' && !isResting && context.state !== 'running') void waitForRunning()
  })

  return {
    context,
    clock,
    post: (message, handOver = []) => node.port.postMessage(message, handOver),
    resume: async () => {
      isResting = false
      return context.state === 'running' || (await waitForRunning())
    },
    rest: () => {
      isResting = true
      if (context.state === 'running') void context.suspend().catch(() => undefined)
    },
    dispose: scope.dispose
  }
}
