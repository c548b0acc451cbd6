// A player that stands where it is put; jsdom has neither sound nor layout.
import { plainAids } from '@shared/audio/listening'
import { createEmitter } from '@client/transport/emitter'
import type { Player, PlayerEvents } from '@client/transport/player'

export interface StillPlayer extends Player {
  seeks: number[]
}

export const createStillPlayer = (durationSec: number): StillPlayer => {
  const events = createEmitter<PlayerEvents>()
  let position = 0
  const seeks: number[] = []
  return {
    capabilities: { pitch: false, schedule: false, aids: false, clicks: false },
    state: 'ready',
    durationSec,
    get heardPosition() {
      return position
    },
    rate: 1,
    semitones: 0,
    volume: 0.7,
    loop: null,
    aids: plainAids,
    clock: () => 0,
    positionAt: () => position,
    load: async () => {},
    play: async () => true,
    pause: () => {},
    seek: (sec) => {
      position = sec
      seeks.push(sec)
      events.emit('jump', { positionSec: sec })
    },
    setRate: () => {},
    setTrim: () => {},
    setAids: () => {},
    setClicks: () => {},
    setCountIn: () => {},
    setPitch: () => {},
    setVolume: () => {},
    setLoop: () => {},
    on: events.on,
    dispose: events.clear,
    seeks
  }
}

/** What jsdom lacks and the lanes ask for. Lanes are 1000 px wide. */
export const furnishPage = (): void => {
  globalThis.ResizeObserver = class {
    observe() {}
    unobserve() {}
    disconnect() {}
  }
  window.matchMedia = (media) =>
    Object.assign(new EventTarget(), {
      matches: false,
      media,
      onchange: null,
      addListener: () => {},
      removeListener: () => {}
    })
  Object.defineProperty(HTMLElement.prototype, 'clientWidth', { configurable: true, get: () => 1000 })
  window.PointerEvent ??= class extends MouseEvent {
    pointerId = 1
    pointerType = 'mouse'
  } as unknown as typeof PointerEvent
  HTMLElement.prototype.setPointerCapture = () => {}
  HTMLElement.prototype.hasPointerCapture = () => true
  HTMLCanvasElement.prototype.getContext = (() => null) as typeof HTMLCanvasElement.prototype.getContext
}
