// The player in the shape that wavesurfer follows: it asks a media element for the place and listens to its events.
import type { Scope } from '@client/lib/scope'
import { rateLimits, type Player } from '@client/transport/player'

/** Members of HTMLMediaElement that wavesurfer 7 reads, sets or calls. */
class PlayerMedia extends EventTarget {
  // Nothing is loaded through it: the player has its own source.
  src = ''
  currentSrc = ''
  muted = false
  controls = false
  autoplay = false
  seeking = false
  readonly error = null
  readonly readyState = 4
  readonly preservesPitch = true
  readonly #player: Player

  constructor(player: Player) {
    super()
    this.#player = player
  }
  get currentTime(): number {
    return this.#player.heardPosition
  }
  set currentTime(sec: number) {
    this.#player.seek(sec)
  }
  get duration(): number {
    return this.#player.durationSec
  }
  get paused(): boolean {
    return this.#player.state !== 'playing'
  }
  get ended(): boolean {
    return this.paused && this.duration > 0 && this.currentTime >= this.duration
  }
  get playbackRate(): number {
    return this.#player.rate
  }
  set playbackRate(rate: number) {
    this.#player.setRate(Math.max(rateLimits.min, Math.min(rateLimits.max, rate)))
  }
  get volume(): number {
    return this.#player.volume
  }
  set volume(volume: number) {
    this.#player.setVolume(volume)
  }
  play(): Promise<void> {
    return this.#player.play().then(() => undefined)
  }
  pause(): void {
    this.#player.pause()
  }
  load(): void {}
  removeAttribute(): void {}
  remove(): void {}
  canPlayType(): string {
    return ''
  }
}

/** Lives as long as the scope: afterwards nothing is told any more. */
export const playerAsMedia = (player: Player, scope: Scope): HTMLMediaElement => {
  const media = new PlayerMedia(player)
  const tell = (...types: string[]): void => types.forEach((type) => media.dispatchEvent(new Event(type)))
  let wasPlaying = player.state === 'playing'
  scope.add(
    player.on('state', (state) => {
      const isPlaying = state === 'playing'
      if (isPlaying !== wasPlaying) tell(isPlaying ? 'play' : media.ended ? 'ended' : 'pause')
      if (isPlaying && !wasPlaying) tell('playing')
      wasPlaying = isPlaying
      tell('timeupdate')
    })
  )
  scope.add(player.on('jump', () => tell('seeking', 'timeupdate', 'seeked')))
  scope.add(player.on('rate', () => tell('ratechange')))
  return media as unknown as HTMLMediaElement
}
