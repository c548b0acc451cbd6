// The engine of our own behind `Player`: an audio worklet over decoded pieces. Loops, seeks, clicks and changes of speed
// are exact to the frame; what is told of the place is what is heard.
import { createScope, type Scope } from '@client/lib/scope'
import { plainAids, totalSemitones, pitchLimits } from '@shared/audio/listening'
import { rateOf } from '@shared/audio/playback/plan-steps'
import type { FromWorklet, ToWorklet } from '@shared/audio/playback/messages'
import type { PlanCommand, PlanLoop, PlanPart, PlanSettings } from '@shared/audio/playback/plan-types'
import { startPart } from '@shared/audio/playback/start-part'
import type { Sec } from '@shared/units'
import { createEmitter } from '../emitter'
import { volumeToGain } from '../loudness-graph'
import { tidyLoop } from '../loop-watch'
import { explainMediaError, retryDelaysMs } from '../media-faults'
import {
  defaultVolume,
  rateLimits,
  type CountIn,
  type GridClick,
  type Player,
  type PlayerEvents,
  type PlayerLoop,
  type PlayerSource
} from '../player'
import { openEngineGraph, type EngineGraph, type GraphEvents } from './engine-graph'
import { PieceFault } from './piece-fault'
import { createPlanMirror, type PlanMirror } from './plan-mirror'
import { openStock, type Stock } from './stock'
import { engineRate } from './take-sound'

/** Loudness gain beyond this lifts mostly noise. */
const maxGainDb = 18
/** Standing still this long the device may sleep. */
const restAfterMs = 60_000
/** A graph that breaks more often than this is given up. */
const mostRebuilds = 4

export interface WorkletEngineDeps {
  openGraph?: (events: GraphEvents) => Promise<EngineGraph>
  openSound?: typeof openStock
  /** This engine cannot play this source here; why, for people. It is of no more use until the next `load`. */
  onUnfit(reason: string): void
}

export interface WorkletEngine extends Player {
  /** Bytes of decoded and encoded sound held or being worked on. */
  readonly heldBytes: number
  readonly heldPieces: readonly number[]
}

/** Where a command will bring it, told at once though it is not heard yet. */
interface Landing {
  sec: Sec
  id: number
  /** Frame of the plan from which the plan itself tells it; null until the worklet has said. */
  frame: number | null
}

export const createWorkletEngine = (deps: WorkletEngineDeps): WorkletEngine => {
  const { openGraph = openEngineGraph, openSound = openStock, onUnfit } = deps
  const scope = createScope()
  const events = createEmitter<PlayerEvents>()

  let state: Player['state'] = 'empty'
  let source: PlayerSource | null = null
  let rate = 1
  let semitones = 0
  let aids = plainAids
  let trim = 1
  let volume = defaultVolume
  let loop: PlayerLoop | null = null
  let clicks: readonly GridClick[] | null = null
  let clickLevel = 1
  let askCountIn: ((startSec: Sec, rate: number) => CountIn | null) | null = null
  let wantsPlaying = false

  let graph: EngineGraph | null = null
  let opening: Promise<EngineGraph> | null = null
  let rebuilds = 0
  /** Everything of the source now loaded; ends with the next. */
  let taking: Scope | null = null
  let load = 0
  let stock: Stock | null = null
  let mirror: PlanMirror | null = null
  let landing: Landing | null = null
  let commands = 0
  /** Jumps asked for at a time: by the command's number until the worklet has said its frame, then by frame. */
  const jumpsAsked = new Map<number, Sec>()
  const jumpsToCome = new Map<number, Sec>()
  let turns = 0
  let told = 1
  let isInTrouble = false
  let hasToldTrouble = false
  let cancelRest = (): void => undefined

  const rateOfTake = (): number => stock?.sampleRate ?? engineRate
  const frames = (sec: Sec): number => sec * rateOfTake()
  const durationSec = (): Sec => {
    if (source && source.durationSec > 0) return source.durationSec
    return stock ? stock.totalFrames / stock.sampleRate : 0
  }
  const setState = (next: Player['state']): void => {
    if (next === state) return
    state = next
    cancelRest()
    if (next === 'ready') cancelRest = scope.timeout(() => graph?.rest(), restAfterMs)
    events.emit('state', next)
  }
  const tellRate = (now: number): void => {
    if (now === told) return
    told = now
    events.emit('rate', { rate: now })
  }

  // Places.
  const clock = (): Sec => graph?.clock.heard() ?? 0
  const heard = (): Sec => {
    if (landing) {
      const isOver = landing.frame !== null && mirror !== null && mirror.frameOf(clock()) >= landing.frame
      if (!isOver) return landing.sec
      landing = null
    }
    return Math.min(mirror?.placeAt(clock()) ?? 0, durationSec())
  }
  const land = (sec: Sec, id: number): void => {
    landing = { sec, id, frame: null }
    events.emit('jump', { positionSec: sec })
  }

  // What the worklet is told.
  const planLoop = (): PlanLoop | null =>
    loop && {
      startFrame: Math.round(frames(loop.span.startSec)),
      endFrame: Math.round(frames(loop.span.endSec)),
      fadeFrames: frames(loop.fadeSec ?? 0),
      restFrames: frames(loop.restSec ?? 0),
      ladder: loop.ladder ?? null
    }
  const pitchRatio = (): number => 2 ** (totalSemitones(semitones, aids) / 12)
  const settings = (): PlanSettings => ({ rate, trim, ratio: pitchRatio(), loop: planLoop() })
  const gainDb = (): number => Math.min(maxGainDb, source?.gainDb ?? 0)
  const frameClicks = () => clicks?.map(({ sec, accent }) => ({ frame: Math.round(frames(sec)), accent })) ?? null
  const post = (message: ToWorklet): void => graph?.post(message)
  const command = (what: PlanCommand, at?: Sec): number => {
    commands += 1
    const isTimed = at !== undefined && mirror?.hasBegun
    const atFrame = isTimed ? Math.round(mirror?.frameOf(at) ?? 0) : undefined
    post({ kind: 'command', load, id: commands, command: what, ...(atFrame === undefined ? {} : { atFrame }) })
    return commands
  }
  const lookAtStock = (): void => {
    const place = landing?.sec ?? mirror?.placeAt(graph?.context.currentTime ?? 0) ?? 0
    stock?.look(frames(place), planLoop(), wantsPlaying)
  }

  // What the worklet tells.
  const handleBegun = (part: PlanPart): void => {
    if (part.turns === turns + 1) {
      turns = part.turns
      if (loop) events.emit('jump', { positionSec: loop.span.startSec })
      events.emit('turn', { count: turns })
    } else turns = part.turns
    const soughtSec = jumpsToCome.get(part.outFrame)
    jumpsToCome.delete(part.outFrame)
    if (soughtSec !== undefined) events.emit('jump', { positionSec: soughtSec })
    if (part.settings.loop?.ladder && loop?.ladder) tellRate(rateOf(part.settings, part.pass))
    if (part.mode === 'waiting') {
      if (wantsPlaying) setState('loading')
      tellTrouble()
    } else if (part.mode !== 'stopped') {
      if (wantsPlaying) setState('playing')
    } else if (wantsPlaying && part.sourceFrame >= (stock?.totalFrames ?? Infinity)) {
      wantsPlaying = false
      setState('ready')
    }
    lookAtStock()
  }
  const handleMessage = (message: FromWorklet): void => {
    if (message.load !== load) return
    mirror?.take(message)
    if (message.kind === 'begun') message.parts.forEach(handleBegun)
    else if (message.kind === 'beat') lookAtStock()
    else if (message.kind === 'done') {
      if (landing?.id === message.id) landing.frame = message.frame
      const sec = jumpsAsked.get(message.id)
      jumpsAsked.delete(message.id)
      if (sec !== undefined) jumpsToCome.set(message.frame, sec)
    }
  }
  const tellTrouble = (): void => {
    if (!isInTrouble) hasToldTrouble = false
    if (!isInTrouble || hasToldTrouble || state !== 'loading') return
    hasToldTrouble = true
    events.emit('fault', { message: explainMediaError(2, true).message })
  }

  // The graph: made once, made again when it breaks.
  const silenced = (): void => {
    if (!wantsPlaying) return
    pause()
    events.emit('blocked', undefined)
  }
  const giveUp = (reason: string): void => {
    if (scope.disposed) return
    // First told, then ended: who takes over asks for the place.
    onUnfit(reason)
    taking?.dispose()
    graph?.dispose()
    graph = opening = null
  }
  const rebuild = async (): Promise<void> => {
    const broken = graph
    if (!broken || scope.disposed) return
    rebuilds += 1
    if (rebuilds > mostRebuilds) return giveUp('The engine of this page has stopped several times.')
    const place = heard()
    graph = opening = null
    broken.dispose()
    try {
      await haveGraph()
    } catch {
      return giveUp('This browser does not let the engine start again.')
    }
    openTake(place)
    stock?.sendAgain()
    if (wantsPlaying) void start()
  }
  const haveGraph = async (): Promise<EngineGraph> => {
    opening ??= openGraph({ onMessage: handleMessage, onSilenced: silenced, onBroken: () => void rebuild() })
    const made = await opening
    if (scope.disposed) made.dispose()
    graph = made
    return made
  }
  /** Tells the worklet of the take, with everything as it is set now. */
  const openTake = (placeSec: Sec): void => {
    if (!stock) return
    load += 1
    const { sampleRate, channels, totalFrames } = stock
    const sourceFrame = Math.round(Math.min(frames(placeSec), totalFrames))
    landing = null
    turns = 0
    mirror = createPlanMirror(sampleRate, startPart(settings(), sourceFrame))
    post({
      kind: 'take',
      load,
      channels,
      sampleRate,
      frames: totalFrames,
      settings: settings(),
      sourceFrame,
      aids,
      gainDb: gainDb(),
      volume: volumeToGain(volume),
      clicks: frameClicks(),
      clickLevel
    })
  }

  const start = async (at?: Sec): Promise<boolean> => {
    const made = graph
    if (!made || !stock) return wantsPlaying
    const isOut = await made.resume()
    if (!wantsPlaying) return true
    if (!isOut) {
      wantsPlaying = false
      setState('ready')
      events.emit('blocked', undefined)
      return false
    }
    const from = heard()
    const isAtEnd = from >= durationSec() - 0.02
    const place = isAtEnd ? (loop?.span.startSec ?? 0) : from
    if (isAtEnd) land(place, command({ kind: 'seek', sourceFrame: frames(place) }, at))
    const rateNow = loop?.ladder ? rateOf(settings(), 0) : rate
    const count = at === undefined ? (askCountIn?.(place, rateNow) ?? null) : null
    const counts = count?.clicks.map(({ atSec, accent }) => ({ atFrame: Math.round(frames(atSec)), accent })) ?? []
    command({ kind: 'play', countFrames: frames(count?.leadSec ?? 0), counts }, at)
    setState(stock.hasPlace(frames(place)) ? 'playing' : 'loading')
    lookAtStock()
    return true
  }
  const pause = (at?: Sec): void => {
    wantsPlaying = false
    if (!stock || (state !== 'playing' && state !== 'loading')) return
    if (at === undefined) {
      // It stands where it was heard when the person pressed, not where the device will have come to.
      const place = heard()
      const id = command({ kind: 'pause', sourceFrame: frames(place) })
      landing = { sec: place, id, frame: null }
    } else command({ kind: 'pause' }, at)
    setState('ready')
  }

  const openSource = async (next: PlayerSource, current: Scope): Promise<void> => {
    for (let attempt = 0; !current.disposed; attempt += 1) {
      try {
        await haveGraph()
        if (current.disposed) return
        const opened = await openSound(next, current.signal, {
          put: (index, page) =>
            graph?.post(
              { kind: 'page', load, index, page },
              page.channels.map(({ buffer }) => buffer as ArrayBuffer)
            ),
          drop: (index) => post({ kind: 'drop', load, index }),
          onTrouble: (isTrouble) => {
            isInTrouble = isTrouble
            tellTrouble()
          },
          onFault: (message) => {
            if (!current.disposed) giveUp(message)
          }
        })
        if (current.disposed) return opened.dispose()
        stock = opened
        current.add(opened.dispose)
        const place = landing?.sec ?? 0
        openTake(place)
        opened.sendAgain()
        lookAtStock()
        if (wantsPlaying) await start()
        else setState('ready')
        return
      } catch (error) {
        if (current.disposed) return
        const isLater = error instanceof PieceFault && error.canRetry
        if (!isLater) return giveUp(error instanceof PieceFault ? error.message : 'Audio worklets do not work here.')
        if (attempt === 0) events.emit('fault', { message: explainMediaError(2, true).message })
        const delay = retryDelaysMs[Math.min(attempt, retryDelaysMs.length - 1)] ?? 1000
        await new Promise<void>((resolve) => {
          current.timeout(resolve, delay)
          current.listen(window, 'online', () => resolve())
          current.add(resolve)
        })
      }
    }
  }

  const engine: WorkletEngine = {
    capabilities: { pitch: true, schedule: true, aids: true, clicks: true },
    get state() {
      return state
    },
    get durationSec() {
      return durationSec()
    },
    get heardPosition() {
      return heard()
    },
    get rate() {
      return loop?.ladder ? told : rate
    },
    get semitones() {
      return semitones
    },
    get aids() {
      return aids
    },
    get volume() {
      return volume
    },
    get loop() {
      return loop
    },
    get heldBytes() {
      return stock?.heldBytes ?? 0
    },
    get heldPieces() {
      return stock?.heldPieces ?? []
    },
    clock,
    positionAt: (at) => {
      if (landing && landing.frame === null) return landing.sec
      return Math.min(mirror?.placeAt(at) ?? landing?.sec ?? 0, durationSec())
    },
    load: async (next) => {
      taking?.dispose()
      const current = scope.child()
      taking = current
      if (stock && state === 'playing') command({ kind: 'pause' })
      stock = null
      mirror = null
      source = next
      wantsPlaying = false
      isInTrouble = false
      jumpsAsked.clear()
      jumpsToCome.clear()
      landing = { sec: 0, id: 0, frame: null }
      if (loop) {
        loop = null
        events.emit('loop', { loop: null })
      }
      setState('loading')
      events.emit('jump', { positionSec: 0 })
      await openSource(next, current)
    },
    play: async (at) => {
      if (!source) return false
      wantsPlaying = true
      if (!stock) {
        setState('loading')
        return true
      }
      return start(at)
    },
    pause,
    seek: (sec, at) => {
      const place = Math.max(0, Math.min(sec, durationSec()))
      if (!stock) return land(place, 0)
      const id = command({ kind: 'seek', sourceFrame: frames(place) }, at)
      if (at === undefined) land(place, id)
      else jumpsAsked.set(id, place)
      lookAtStock()
    },
    setRate: (next, at) => {
      const kept = Math.max(rateLimits.min, Math.min(rateLimits.max, Number.isFinite(next) ? next : 1))
      if (kept === rate) return
      rate = kept
      command({ kind: 'rate', rate }, at)
      if (!loop?.ladder) tellRate(rate)
    },
    setTrim: (factor) => {
      if (factor === trim || !(factor > 0)) return
      trim = factor
      command({ kind: 'trim', trim })
    },
    setPitch: (next, at) => {
      const { minSemitones, maxSemitones } = pitchLimits
      const kept = Math.max(minSemitones, Math.min(maxSemitones, Number.isFinite(next) ? next : 0))
      if (kept === semitones) return
      semitones = kept
      command({ kind: 'ratio', ratio: pitchRatio() }, at)
      events.emit('pitch', { semitones })
    },
    setAids: (next) => {
      const before = pitchRatio()
      aids = next
      if (pitchRatio() !== before) command({ kind: 'ratio', ratio: pitchRatio() })
      post({ kind: 'aids', aids, gainDb: gainDb() })
      events.emit('aids', { aids })
    },
    setVolume: (next) => {
      volume = Math.max(0, Math.min(1, next))
      post({ kind: 'volume', gain: volumeToGain(volume) })
    },
    setClicks: (next, level = clickLevel) => {
      const wasOn = clicks !== null
      clicks = next
      clickLevel = level
      post({ kind: 'clicks', clicks: frameClicks(), level })
      if (wasOn !== (next !== null)) events.emit('clicks', { isOn: next !== null })
    },
    setCountIn: (next) => {
      askCountIn = next
    },
    setLoop: (next, at) => {
      const span = next ? tidyLoop(next.span, durationSec()) : null
      const from = heard()
      loop = next && span ? { ...next, span } : null
      const id = command({ kind: 'loop', loop: planLoop() }, at)
      turns = 0
      events.emit('loop', { loop })
      if (!loop?.ladder) tellRate(rate)
      const isOutside = loop !== null && (from < loop.span.startSec || from >= loop.span.endSec)
      if (loop && isOutside && at === undefined) land(loop.span.startSec, id)
      lookAtStock()
    },
    on: events.on,
    dispose: () => {
      scope.dispose()
      events.clear()
      graph?.dispose()
    }
  }
  return engine
}
