// The sound of a take by the best engine there is here: our own, or the media element where ours cannot work.
import { plainAids, type Aids } from '@shared/audio/listening'
import type { Sec } from '@shared/units'
import { createWorkletEngine } from './engine/worklet-engine'
import { createEmitter } from './emitter'
import { createMediaElementPlayer } from './media-element-engine'
import type { Player, PlayerEvents, PlayerSource } from './player'

export interface CreatePlayerDeps {
  /** What cannot be done here and why, in words for the person; null when everything can. */
  onMissing?: (words: string | null) => void
  makeWorklet?: typeof createWorkletEngine
  makeElement?: typeof createMediaElementPlayer
  /** Whether worklets exist at all. */
  hasWorklets?: () => boolean
}

/** Worklets stand only where the page came over https or from this machine itself. */
const browserHasWorklets = (): boolean =>
  typeof AudioWorkletNode !== 'undefined' && typeof OfflineAudioContext !== 'undefined' && window.isSecureContext

const without = 'loops come round a little late, and there is no pitch, no low focus, no click'
const insecureWords = `This address is not a secure one (https): ${without}.`
const unfitWords = (reason: string): string => `${reason} So ${without}.`

/** One player for the desk's lifetime; the engine behind it may change with the source. */
export const createPlayer = (deps: CreatePlayerDeps = {}): Player => {
  const {
    onMissing = () => undefined,
    makeWorklet = createWorkletEngine,
    makeElement = createMediaElementPlayer
  } = deps
  const hasWorklets = deps.hasWorklets ?? browserHasWorklets
  const events = createEmitter<PlayerEvents>()
  let source: PlayerSource | null = null
  let loads = 0
  let wantsPlaying = false
  let aids: Aids = plainAids
  let semitones = 0
  let countIn: Parameters<Player['setCountIn']>[0] = null
  let clicks: Parameters<Player['setClicks']> = [null]
  let unlisten = (): void => undefined
  let isDisposed = false

  const listenTo = (engine: Player): void => {
    unlisten()
    const pass = <E extends keyof PlayerEvents>(event: E) =>
      engine.on(event, (payload) => {
        if (event === 'state' && payload === 'ready') wantsPlaying = false
        events.emit(event, payload)
      })
    const stops = [
      pass('state'),
      pass('jump'),
      pass('rate'),
      pass('pitch'),
      pass('aids'),
      pass('clicks'),
      pass('loop'),
      pass('turn'),
      pass('blocked'),
      pass('fault')
    ]
    unlisten = () => stops.forEach((stop) => stop())
  }
  const worklet = (): Player => makeWorklet({ onUnfit: (reason) => void fallBack(unfitWords(reason)) })

  let engine: Player = hasWorklets() ? worklet() : makeElement()
  let isWorklet = hasWorklets()
  listenTo(engine)

  /** Another engine takes over with everything as it is set. */
  const change = (next: Player, isNextWorklet: boolean): void => {
    const before = engine
    unlisten()
    engine = next
    isWorklet = isNextWorklet
    next.setVolume(before.volume)
    next.setRate(before.rate)
    next.setPitch(semitones)
    next.setAids(aids)
    next.setClicks(...clicks)
    next.setCountIn(countIn)
    before.dispose()
    listenTo(next)
  }
  const fallBack = async (words: string): Promise<void> => {
    if (isDisposed || !source) return
    const load = loads
    const { heardPosition, loop } = engine
    const wanted = wantsPlaying
    change(makeElement(), false)
    onMissing(words)
    await engine.load(source)
    if (load !== loads || isDisposed) return
    if (loop) engine.setLoop(loop)
    if (heardPosition > 0) engine.seek(heardPosition)
    if (wanted) void engine.play()
  }

  return {
    get capabilities() {
      return engine.capabilities
    },
    get state() {
      return engine.state
    },
    get durationSec() {
      return engine.durationSec
    },
    get heardPosition() {
      return engine.heardPosition
    },
    get rate() {
      return engine.rate
    },
    get semitones() {
      return engine.semitones
    },
    get volume() {
      return engine.volume
    },
    get loop() {
      return engine.loop
    },
    get aids() {
      return engine.aids
    },
    clock: () => engine.clock(),
    positionAt: (clock: Sec) => engine.positionAt(clock),
    load: async (next) => {
      source = next
      loads += 1
      wantsPlaying = false
      if (!isWorklet && hasWorklets()) change(worklet(), true)
      onMissing(
        hasWorklets()
          ? null
          : window.isSecureContext
            ? unfitWords('This browser cannot run the exact player.')
            : insecureWords
      )
      await engine.load(next)
    },
    play: (at) => {
      wantsPlaying = true
      return engine.play(at)
    },
    pause: (at) => {
      wantsPlaying = false
      engine.pause(at)
    },
    seek: (sec, at) => engine.seek(sec, at),
    setRate: (rate, at) => engine.setRate(rate, at),
    setTrim: (factor) => engine.setTrim(factor),
    setPitch: (next, at) => {
      semitones = next
      engine.setPitch(next, at)
    },
    setAids: (next) => {
      aids = next
      engine.setAids(next)
    },
    setVolume: (volume) => engine.setVolume(volume),
    setClicks: (...next) => {
      clicks = next
      engine.setClicks(...next)
    },
    setCountIn: (next) => {
      countIn = next
      engine.setCountIn(next)
    },
    setLoop: (loop, at) => engine.setLoop(loop, at),
    on: events.on,
    dispose: () => {
      isDisposed = true
      unlisten()
      events.clear()
      engine.dispose()
    }
  }
}
