// An audio graph without a device: the real renderer, its clock moved by hand. What is heard lags behind by `lateSec`.
import type { EngineGraph, GraphEvents } from '@client/transport/engine/engine-graph'
import type { Stock, StockEvents } from '@client/transport/engine/stock'
import type { FromWorklet, ToWorklet } from '@shared/audio/playback/messages'
import { createPageStore, type PageStore } from '@shared/audio/playback/page-store'
import { createPlayback, type Playback } from '@shared/audio/playback/render'

export const fakeRate = 8000
export const lateSec = 0.05

export const createFakeGraph = () => {
  let events: GraphEvents | null = null
  let store: PageStore | null = null
  let playback: Playback | null = null
  let load = 0
  let frame = 0
  let startFrame = 0
  let refuses = false
  let opened = 0
  let isDown = false
  /** Answers come a little later, as from another thread. */
  let outbox: FromWorklet[] = []
  const say = (message: FromWorklet) => void outbox.push(message)
  const flush = () => {
    const messages = outbox
    outbox = []
    for (const message of messages) events?.onMessage(message)
  }
  const news = () => {
    const told = playback?.news()
    if (told?.plan) say({ kind: 'plan', load, ...told.plan })
    if (told && told.begun.length > 0) say({ kind: 'begun', load, parts: told.begun })
  }
  const hear = (message: ToWorklet): void => {
    if (message.kind === 'take') {
      load = message.load
      store = createPageStore({ channels: 1, sampleRate: message.sampleRate, frames: message.frames })
      playback = createPlayback({ source: store, settings: message.settings, sourceFrame: message.sourceFrame })
      startFrame = frame
      say({ kind: 'start', load, startSec: frame / fakeRate, delaySec: playback.delayFrames / fakeRate })
      return
    }
    if ('load' in message && message.load !== load) return
    if (message.kind === 'page') store?.put(message.index, message.page)
    if (message.kind === 'drop') store?.drop(message.index)
    if (message.kind === 'command') {
      const at = playback?.command(message.command, message.atFrame) ?? 0
      news()
      say({ kind: 'done', load, id: message.id, frame: at })
    }
  }
  const graph = {
    context: {
      get currentTime() {
        return frame / fakeRate
      }
    },
    clock: { heard: () => Math.max(0, frame / fakeRate - lateSec), reset: () => undefined },
    post: hear,
    resume: async () => !refuses,
    rest: () => undefined,
    dispose: () => undefined
  } as unknown as EngineGraph
  return {
    open: async (given: GraphEvents) => {
      if (isDown) throw new Error('no worklets')
      opened += 1
      events = given
      return graph
    },
    /** Lets so much time pass. */
    run: (sec: number) => {
      const block = [new Float32Array(128)]
      flush()
      for (const end = frame + sec * fakeRate; frame < end; frame += 128) {
        playback?.process(block, 128)
        news()
        flush()
      }
      say({ kind: 'beat', load, frame: frame - startFrame })
      flush()
    },
    breakDown: () => events?.onBroken(),
    silence: () => events?.onSilenced(),
    refuse: (isRefusing: boolean) => (refuses = isRefusing),
    goDown: () => (isDown = true),
    opened: () => opened
  }
}
export type FakeGraph = ReturnType<typeof createFakeGraph>

/** Ten seconds a page; `holdBack` keeps them until `deliver`. */
export const createFakeStock = (seconds: number) => {
  const frames = seconds * fakeRate
  const pageFrames = 10 * fakeRate
  let given: StockEvents | null = null
  let isHeldBack = false
  const send = () => {
    for (let index = 0; index * pageFrames < frames; index += 1)
      given?.put(index, { firstFrame: index * pageFrames, channels: [new Float32Array(pageFrames)] })
  }
  return {
    open: async (_source: unknown, _signal: AbortSignal, events: StockEvents): Promise<Stock> => {
      given = events
      return {
        sampleRate: fakeRate,
        channels: 1,
        totalFrames: frames,
        look: () => undefined,
        hasPlace: () => !isHeldBack,
        sendAgain: () => isHeldBack || send(),
        heldBytes: 0,
        heldPieces: [],
        dispose: () => undefined
      }
    },
    holdBack: () => (isHeldBack = true),
    deliver: () => {
      isHeldBack = false
      send()
    },
    events: () => given
  }
}
