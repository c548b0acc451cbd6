// A player that can do everything and says what it was told; its place and passes are set by hand.
import { plainAids } from '@shared/audio/listening'
import { createEmitter } from '@client/transport/emitter'
import { defaultVolume, type Player, type PlayerCapabilities, type PlayerEvents } from '@client/transport/player'

type Writable<T> = { -readonly [K in keyof T]: T[K] }

export interface PractisingPlayer extends Writable<Player> {
  /** What was asked of it, newest last. */
  clicks: Parameters<Player['setClicks']>
  countIn: Parameters<Player['setCountIn']>[0]
  turn: (count: number) => void
}

export const whole: PlayerCapabilities = { pitch: true, schedule: true, aids: true, clicks: true }

export const practisingPlayer = (capabilities = whole): PractisingPlayer => {
  const events = createEmitter<PlayerEvents>()
  const player: PractisingPlayer = {
    capabilities,
    state: 'ready',
    durationSec: 60,
    heardPosition: 0,
    rate: 1,
    semitones: 0,
    volume: defaultVolume,
    loop: null,
    aids: plainAids,
    clicks: [null],
    countIn: null,
    clock: () => 0,
    positionAt: () => player.heardPosition,
    load: async () => undefined,
    play: async () => {
      player.state = 'playing'
      events.emit('state', 'playing')
      return true
    },
    pause: () => {
      player.state = 'ready'
      events.emit('state', 'ready')
    },
    seek: (sec) => {
      player.heardPosition = sec
    },
    setRate: (rate) => {
      player.rate = rate
      events.emit('rate', { rate })
    },
    setTrim: () => undefined,
    setPitch: (semitones) => {
      player.semitones = semitones
      events.emit('pitch', { semitones })
    },
    setAids: (aids) => {
      player.aids = aids
      events.emit('aids', { aids })
    },
    setVolume: (volume) => {
      player.volume = volume
    },
    setClicks: (...clicks) => {
      player.clicks = clicks
    },
    setCountIn: (countIn) => {
      player.countIn = countIn
    },
    setLoop: (loop) => {
      player.loop = loop
      events.emit('loop', { loop })
    },
    on: events.on,
    dispose: events.clear,
    turn: (count) => events.emit('turn', { count })
  }
  return player
}
