// The plain engine: an HTMLAudioElement with its pitch kept. Good for listening and slow listening; its loops come
// round a little late (the element's own seek), it acts at once and cannot shift pitch.
import { createScope } from '@client/lib/scope'
import { plainAids } from '@shared/audio/listening'
import type { Sec } from '@shared/units'
import { createEmitter } from './emitter'
import { createLoudnessGraph, dbToGain, volumeToGain, type LoudnessGraph } from './loudness-graph'
import { hasToTurn, lookAgainMs, tidyLoop, wrapInLoop } from './loop-watch'
import { explainMediaError, gaveUpMessage, retryDelaysMs } from './media-faults'
import { defaultVolume, rateLimits, type Player, type PlayerEvents, type PlayerLoop, type PlayerSource } from './player'
import { createPositionClock } from './position-clock'

export interface MediaElementDeps {
  makeElement?: () => HTMLAudioElement
  makeContext?: () => AudioContext | null
  /** Seconds, steadily rising. */
  now?: () => Sec
}

const browserDeps: Required<MediaElementDeps> = {
  makeElement: () => new Audio(),
  makeContext: () => (typeof AudioContext === 'undefined' ? null : new AudioContext({ latencyHint: 'interactive' })),
  now: () => performance.now() / 1000
}

/** How long the fade before a jump gets, and how long a browser may take to let sound out. */
const duckMs = 14
const resumePatienceMs = 400

export const createMediaElementPlayer = (deps: MediaElementDeps = {}): Player => {
  const { makeElement, makeContext, now } = { ...browserDeps, ...deps }
  const scope = createScope()
  const events = createEmitter<PlayerEvents>()
  const clock = createPositionClock()
  const element = makeElement()
  element.preload = 'auto'
  element.preservesPitch = true

  let graph: LoudnessGraph | null | undefined
  let source: PlayerSource | null = null
  let state: Player['state'] = 'empty'
  let rate = 1
  let trim = 1
  let volume = defaultVolume
  let loop: PlayerLoop | null = null
  let turns = 0
  /** Where a jump that is still on its way will land. */
  let landing: Sec | null = null
  let lastSeen: Sec = 0
  let wantsPlaying = false
  let hasLoaded = false
  let retries = 0
  let cancelJump = () => {}
  let cancelRetry = () => {}
  let cancelLook = () => {}
  let loadingDone = () => {}

  const setState = (next: Player['state']) => {
    if (next === state) return
    state = next
    events.emit('state', next)
  }
  const durationSec = (): Sec => {
    if (source && source.durationSec > 0) return source.durationSec
    return Number.isFinite(element.duration) ? element.duration : 0
  }
  const isSounding = () => state === 'playing' && !element.paused

  const heard = (): Sec => {
    if (landing !== null) return landing
    if (!isSounding() || element.seeking) {
      clock.reset()
      return element.currentTime
    }
    const late = (graph?.latencySec() ?? 0) * rate
    return Math.max(0, Math.min(durationSec(), clock.read(element.currentTime, now(), rate * trim) - late))
  }

  // Loudness. The graph is made at the first play, inside the person's tap, as browsers want it.
  const applyVolume = () => {
    if (graph) graph.setVolume(volume)
    else element.volume = Math.min(1, volumeToGain(volume) * dbToGain(source?.gainDb ?? 0))
  }
  const makeGraph = () => {
    if (graph !== undefined) return
    graph = createLoudnessGraph(element, makeContext)
    if (graph) {
      element.volume = 1
      graph.setGainDb(source?.gainDb ?? 0)
    }
    applyVolume()
  }
  const letSoundOut = async (): Promise<boolean> => {
    if (!graph || graph.isRunning()) return true
    await Promise.race([
      graph.resume().catch(() => {}),
      new Promise<void>((resolve) => scope.timeout(resolve, resumePatienceMs))
    ])
    return graph.isRunning()
  }

  // Jumps: fade out, jump, fade in when the element has landed.
  const jump = (sec: Sec) => {
    const target = Math.max(0, Math.min(sec, durationSec()))
    cancelJump()
    landing = target
    lastSeen = target
    clock.reset()
    const land = () => {
      cancelJump = () => {}
      // Before the metadata is in there is nothing to seek in: the landing waits for it.
      if (element.readyState === 0) return
      element.currentTime = target
      landing = null
    }
    if (isSounding() && graph) {
      graph.duck()
      cancelJump = scope.timeout(land, duckMs)
    } else land()
    events.emit('jump', { positionSec: target })
    look()
  }

  // The loop is watched by frames, time updates and a timer aimed at its end: a hidden tab has no frames.
  const look = () => {
    cancelLook()
    if (!loop || state !== 'playing') return
    const position = landing ?? element.currentTime
    if (landing === null && !element.seeking) {
      if (hasToTurn(loop.span, lastSeen, position)) return turn()
      lastSeen = position
    }
    const stopFrame = scope.frame(look)
    const stopTimer = scope.timeout(look, lookAgainMs(loop.span, position, rate))
    cancelLook = () => {
      stopFrame()
      stopTimer()
    }
  }
  const turn = () => {
    if (!loop) return
    turns += 1
    jump(loop.span.startSec)
    events.emit('turn', { count: turns })
  }

  const applyRate = () => {
    // load() puts the rate back to the default one, so both are set.
    element.defaultPlaybackRate = rate
    element.playbackRate = rate * trim
    element.preservesPitch = true
  }

  const openSource = (positionSec: Sec) => {
    if (!source) return
    element.src = source.url
    element.load()
    applyRate()
    landing = positionSec > 0 ? positionSec : null
  }
  const tryAgain = () => {
    cancelRetry()
    cancelRetry = () => {}
    retries += 1
    openSource(heard())
  }
  const fail = (message: string) => {
    wantsPlaying = false
    setState('failed')
    events.emit('fault', { message })
    loadingDone()
  }

  scope.listen(element, 'loadedmetadata', () => {
    hasLoaded = true
    retries = 0
    applyRate()
    if (landing !== null) {
      element.currentTime = landing
      landing = null
    }
    clock.reset()
    if (wantsPlaying) void player.play()
    else setState('ready')
    loadingDone()
  })
  scope.listen(element, 'playing', () => {
    clock.reset()
    lastSeen = element.currentTime
    if (!wantsPlaying) return
    setState('playing')
    graph?.unduck()
    look()
  })
  scope.listen(element, 'pause', () => {
    clock.reset()
    // The system's media keys and a headset being unplugged pause without asking us.
    if (state === 'playing' && !element.ended) {
      wantsPlaying = false
      setState('ready')
    }
  })
  scope.listen(element, 'seeked', () => {
    clock.reset()
    if (landing === null) graph?.unduck()
    look()
  })
  scope.listen(element, 'timeupdate', () => look())
  scope.listen(element, 'ended', () => {
    if (loop && lastSeen < loop.span.endSec) {
      turn()
      void element.play().catch(() => {})
      return
    }
    wantsPlaying = false
    setState('ready')
  })
  scope.listen(element, 'error', () => {
    if (!source) return
    const fault = explainMediaError(element.error?.code, hasLoaded)
    if (!fault.canRetry) return fail(fault.message)
    const delay = retryDelaysMs[retries]
    if (delay === undefined) return fail(gaveUpMessage)
    landing = heard()
    setState('loading')
    if (retries === 0) events.emit('fault', { message: fault.message })
    cancelRetry()
    cancelRetry = scope.timeout(tryAgain, delay)
  })
  scope.listen(window, 'online', () => {
    if (state === 'loading' && retries > 0) tryAgain()
  })

  const player: Player = {
    capabilities: { pitch: false, schedule: false, aids: false, clicks: false },
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
      return rate
    },
    semitones: 0,
    aids: plainAids,
    get volume() {
      return volume
    },
    get loop() {
      return loop
    },
    clock: now,
    positionAt: (at) => {
      const position = heard()
      const elapsed = isSounding() ? (at - now()) * rate * trim : 0
      return Math.max(0, Math.min(durationSec(), wrapInLoop(loop?.span ?? null, position, elapsed)))
    },
    load: (next) => {
      loadingDone()
      cancelRetry()
      cancelJump()
      wantsPlaying = false
      hasLoaded = false
      retries = 0
      turns = 0
      lastSeen = 0
      source = next
      if (loop) {
        loop = null
        events.emit('loop', { loop: null })
      }
      setState('loading')
      graph?.duck()
      graph?.setGainDb(next.gainDb ?? 0)
      applyVolume()
      clock.reset()
      landing = null
      openSource(0)
      events.emit('jump', { positionSec: 0 })
      return new Promise((resolve) => {
        loadingDone = resolve
      })
    },
    play: async () => {
      if (!source) return false
      wantsPlaying = true
      if (state === 'failed') {
        retries = 0
        setState('loading')
        openSource(heard())
      }
      makeGraph()
      if (!element.paused && state === 'ready') {
        // Pressed again while the fade of a pause was running: the element never stopped.
        cancelJump()
        cancelJump = () => {}
        landing = null
        setState('playing')
        graph?.unduck()
        look()
      }
      const atEnd = durationSec() > 0 && heard() >= durationSec() - 0.02
      if (atEnd) jump(loop?.span.startSec ?? 0)
      try {
        const [, isOut] = await Promise.all([element.play(), letSoundOut()])
        if (isOut) {
          graph?.unduck()
          return true
        }
      } catch (error) {
        // AbortError: a pause or another source came in between, which is no refusal.
        if (!(error instanceof DOMException && error.name === 'NotAllowedError')) return wantsPlaying
      }
      wantsPlaying = false
      element.pause()
      setState('ready')
      events.emit('blocked', undefined)
      return false
    },
    pause: () => {
      wantsPlaying = false
      cancelLook()
      if (state !== 'playing') return element.pause()
      const at = heard()
      setState('ready')
      const stop = () => {
        cancelJump = () => {}
        element.pause()
        element.currentTime = at
        landing = null
      }
      cancelJump()
      if (!graph) return stop()
      // The fade runs on for a moment; the place is the one that was heard when the person pressed.
      graph.duck()
      landing = at
      cancelJump = scope.timeout(stop, duckMs)
    },
    seek: (sec) => jump(sec),
    setRate: (next) => {
      const kept = Math.max(rateLimits.min, Math.min(rateLimits.max, Number.isFinite(next) ? next : 1))
      if (kept === rate) return
      rate = kept
      clock.reset()
      applyRate()
      events.emit('rate', { rate })
      look()
    },
    setTrim: (factor) => {
      if (factor === trim) return
      trim = factor
      clock.reset()
      applyRate()
    },
    setPitch: () => {},
    setAids: () => {},
    setClicks: () => {},
    setCountIn: () => {},
    setVolume: (next) => {
      volume = Math.max(0, Math.min(1, next))
      applyVolume()
    },
    setLoop: (next) => {
      const span = next ? tidyLoop(next.span, durationSec()) : null
      loop = next && span ? { ...next, span } : null
      turns = 0
      lastSeen = heard()
      events.emit('loop', { loop })
      if (loop && (lastSeen < loop.span.startSec || lastSeen >= loop.span.endSec)) jump(loop.span.startSec)
      look()
    },
    on: events.on,
    dispose: () => {
      scope.dispose()
      events.clear()
      element.pause()
      element.removeAttribute('src')
      element.load()
      graph?.dispose()
      loadingDone()
    }
  }
  return player
}
