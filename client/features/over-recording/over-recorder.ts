// One recording against a take: starts the take, keeps what comes in safe second by second, and says which tries lie in it.
import { cutTries, passesIn, type PassBounds } from '@shared/practice/over-recording'
import { wavHeader, wavSamples } from '@shared/audio/wav'
import { freshId } from '@client/lib/ids'
import { holdRecording } from '@client/lib/piece-store'
import { createScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import type { Capture, CapturedBlock } from './capture'
import { createClockPairs } from './clock-pairs'
import { browserTryStore, type OneTry, type Recorded, type TryStore } from './try-store'

export interface OverRecorderView {
  state: 'starting' | 'counting' | 'playing' | 'stopping' | 'stopped'
  fault: string | null
}

export interface OverRecorder {
  view(): OverRecorderView
  subscribe(listener: () => void): () => void
  /** Seconds recorded, counting in included. */
  lengthSec(): Sec
  /** Ends it; gives what was recorded, or null when nothing of it is a try. */
  stop(): Promise<Recorded | null>
  dispose(): void
}

interface Deps {
  /** Ready to play from where it stands, with everything set. */
  player: Player
  capture: Capture
  delaySec: Sec
  bounds: PassBounds
  /** Goes round: every pass is a try. Otherwise it ends at the end of the bounds. */
  isLooping: boolean
  ownerId: string
  takeId: string
  firstNumber: number
  store?: TryStore
  /** ms since 1970. */
  now?: () => number
}

/** What is played last is still on its way when the take has stopped. */
const patienceSec = 0.3
/** After the end of the passage it is recorded on for the last note to ring. */
const ringSec = 1.2

export const startOverRecording = (deps: Deps): OverRecorder => {
  const { player, capture, delaySec, bounds, isLooping, store = browserTryStore, now = Date.now } = deps
  const { sampleRate, channels } = capture
  const scope = createScope()
  const listeners = new Set<() => void>()
  const pairs = createClockPairs(player, capture)
  const id = freshId()
  const release = holdRecording(id)
  let view: OverRecorderView = { state: 'starting', fault: null }
  let firstFrame: number | null = null
  let frames = 0
  let filled = 0
  let pieces = 0
  let piece = newPiece()
  let tries: OneTry[] = []
  let writing: Promise<void> = Promise.resolve()
  let stopping: Promise<Recorded | null> | null = null

  function newPiece(): Float32Array[] {
    return Array.from({ length: channels }, () => new Float32Array(sampleRate))
  }
  const change = (part: Partial<OverRecorderView>): void => {
    if (part.state === view.state && part.fault === undefined) return
    view = { ...view, ...part }
    for (const listener of listeners) listener()
  }
  const startedMs = now()
  const recorded = (): Recorded => {
    const { ownerId, takeId } = deps
    return {
      id,
      ownerId,
      takeId,
      startedMs,
      sampleRate,
      channels,
      pieces,
      frames: Math.min(frames, pieces * sampleRate),
      tries
    }
  }
  const findTries = (): void => {
    const offset = pairs.offsetSec()
    if (firstFrame === null || !Number.isFinite(offset)) return
    const passes = passesIn(pairs.heard, bounds)
    const zeroClockSec = firstFrame / sampleRate + offset
    const cuts = cutTries(passes, { sampleRate, frames, zeroClockSec, delaySec })
    tries = cuts.map((cut, index) => ({
      id: tries[index]?.id ?? freshId(),
      number: deps.firstNumber + index,
      cut,
      isGone: false
    }))
  }

  const putPiece = (): void => {
    const index = pieces
    const samples = piece.map((channel) => channel.subarray(0, filled))
    const blob = new Blob([wavHeader(sampleRate, channels, filled), wavSamples(samples)], { type: 'audio/wav' })
    pieces += 1
    filled = 0
    piece = newPiece()
    findTries()
    const known = recorded()
    writing = writing.then(async () => {
      await store.putPiece(id, index, blob)
      await store.putBegun(known)
    })
  }
  const append = (samples: readonly Float32Array[], length: number): void => {
    for (let done = 0; done < length;) {
      const count = Math.min(length - done, sampleRate - filled)
      piece.forEach((channel, index) => {
        const from = samples[index] ?? samples[0]
        if (from) channel.set(from.subarray(done, done + count), filled)
      })
      filled += count
      frames += count
      done += count
      if (filled === sampleRate) putPiece()
    }
  }
  const take = ({ frame, channels: samples }: CapturedBlock): void => {
    firstFrame ??= frame
    // Time that nobody recorded is silence: what comes after keeps its place.
    const missing = frame - firstFrame - frames
    if (missing > 0) append([new Float32Array(missing)], missing)
    append(samples, samples[0]?.length ?? 0)
  }
  const follow = (): void => {
    pairs.read()
    const [before, last] = [pairs.heard.at(-2), pairs.heard.at(-1)]
    if (stopping || !before || !last) return
    if (player.state === 'playing')
      change({ state: last.placeSec > before.placeSec ? 'playing' : view.state === 'playing' ? 'playing' : 'counting' })
    const endSec = bounds.endSec
    if (!isLooping && endSec !== null && last.placeSec >= endSec + ringSec * player.rate) void stop()
  }
  const stop = (): Promise<Recorded | null> => {
    stopping ??= end()
    return stopping
  }
  const end = async (): Promise<Recorded | null> => {
    change({ state: 'stopping' })
    player.pause()
    await new Promise<void>((resolve) => scope.timeout(resolve, (Math.max(0, delaySec) + patienceSec) * 1000))
    await capture.flush()
    scope.dispose()
    if (filled > 0) putPiece()
    findTries()
    const known = recorded()
    await writing
    const isWorth = known.tries.length > 0
    if (isWorth) await store.putBegun(known)
    else await store.remove(id)
    release()
    change({ state: 'stopped' })
    listeners.clear()
    return isWorth ? known : null
  }

  scope.add(
    capture.onBlock((block) => {
      take(block)
      follow()
    })
  )
  scope.add(
    player.on('state', (state) => {
      // The take is over, or cannot be played.
      if (view.state === 'playing' && state === 'ready') void stop()
      if (state === 'failed') {
        change({ fault: 'The take could not be played on. What was recorded until then is here.' })
        void stop()
      }
    })
  )
  scope.listen(window, 'beforeunload', (event) => event.preventDefault())
  void player.play().then((isOut) => {
    if (isOut || stopping) return
    change({ fault: 'The browser lets sound out after a tap. Press Record once more.' })
    void stop()
  })

  return {
    view: () => view,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => void listeners.delete(listener)
    },
    lengthSec: () => frames / sampleRate,
    stop,
    dispose: () => {
      listeners.clear()
      void stop()
    }
  }
}
