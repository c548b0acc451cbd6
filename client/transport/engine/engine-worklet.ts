// The shell around the renderer on the audio thread: messages in, blocks and news out. The sound itself is shared/audio/playback.
import type { FromWorklet, ToWorklet } from '@shared/audio/playback/messages'
import { createPageStore, type PageStore } from '@shared/audio/playback/page-store'
import { createRateMatch } from '@shared/audio/playback/rate-match'
import { createPlayback, type Playback } from '@shared/audio/playback/render'

interface Take {
  load: number
  store: PageStore
  playback: Playback
  render: (out: readonly Float32Array[], frames: number) => void
  rate: number
  /** The context's frame that is expected next; null before the first. */
  nextFrame: number | null
  nextBeat: number
}
type TakeMessage = Extract<ToWorklet, { kind: 'take' }>

const beatsPerSec = 4

const openTake = (message: TakeMessage): Take => {
  const { load, channels, sampleRate: rate, frames } = message
  const store = createPageStore({ channels, sampleRate: rate, frames })
  const playback = createPlayback({ source: store, settings: message.settings, sourceFrame: message.sourceFrame })
  playback.setAids(message.aids, message.gainDb)
  playback.setVolume(message.volume)
  playback.setClicks(message.clicks, message.clickLevel)
  const render = rate === sampleRate ? playback.process : createRateMatch(playback.process, channels, rate / sampleRate)
  return { load, store, playback, render, rate, nextFrame: null, nextBeat: 0 }
}

registerProcessor(
  'plumbline-engine',
  class extends AudioWorkletProcessor {
    #take: Take | null = null

    constructor() {
      super()
      this.port.addEventListener('message', ({ data }: MessageEvent<ToWorklet>) => this.#hear(data))
      this.port.start()
    }

    #say(message: FromWorklet): void {
      this.port.postMessage(message, [])
    }

    #hear(message: ToWorklet): void {
      if (message.kind === 'take') {
        this.#take = openTake(message)
        return
      }
      const take = this.#take
      if (!take || ('load' in message && message.load !== take.load)) return
      const { playback, store, load } = take
      switch (message.kind) {
        case 'page':
          return store.put(message.index, message.page)
        case 'drop':
          return store.drop(message.index)
        case 'command': {
          const frame = playback.command(message.command, message.atFrame)
          this.#tellNews(take)
          return this.#say({ kind: 'done', load, id: message.id, frame })
        }
        case 'aids':
          return playback.setAids(message.aids, message.gainDb)
        case 'volume':
          return playback.setVolume(message.gain)
        case 'clicks':
          return playback.setClicks(message.clicks, message.level)
      }
    }

    #tellNews({ playback, load }: Take): void {
      const news = playback.news()
      if (news?.plan) this.#say({ kind: 'plan', load, ...news.plan })
      if (news && news.begun.length > 0) this.#say({ kind: 'begun', load, parts: news.begun })
    }

    process(_inputs: Float32Array[][], outputs: Float32Array[][]): boolean {
      const take = this.#take
      const out = outputs[0]
      const first = out?.[0]
      if (!take || !out || !first) return true
      const { load, playback, rate } = take
      if (take.nextFrame === null)
        this.#say({ kind: 'start', load, startSec: currentFrame / sampleRate, delaySec: playback.delayFrames / rate })
      // Browsers leave blocks out, when a context starts for one (Chromium 156: 90 ms, sometimes).
      else if (currentFrame > take.nextFrame)
        playback.skip(Math.round(((currentFrame - take.nextFrame) * rate) / sampleRate))
      take.nextFrame = currentFrame + first.length
      take.render(playback.channels === 1 ? [first] : out, first.length)
      if (playback.channels === 1) for (const other of out.slice(1)) other.set(first)
      this.#tellNews(take)
      if (playback.frame >= take.nextBeat) {
        take.nextBeat = playback.frame + rate / beatsPerSec
        this.#say({ kind: 'beat', load, frame: playback.frame })
      }
      return true
    }
  }
)
