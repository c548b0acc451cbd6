// A media element driven by hand: `run(sec)` lets that much real time pass. Web Audio is absent, as in jsdom.
export class FakeAudio extends EventTarget {
  src = ''
  preload = ''
  volume = 1
  playbackRate = 1
  defaultPlaybackRate = 1
  preservesPitch = false
  paused = true
  ended = false
  seeking = false
  readyState = 0
  duration = NaN
  error: { code: number } | null = null
  loads = 0
  refuses = false
  /** Length that the next load finds. */
  found = 100
  #time = 0

  get currentTime(): number {
    return this.#time
  }
  set currentTime(sec: number) {
    this.#time = sec
    this.seeking = true
  }
  load(): void {
    this.loads += 1
    this.readyState = 0
    this.paused = true
    this.#time = 0
    this.playbackRate = this.defaultPlaybackRate
  }
  removeAttribute(): void {
    this.src = ''
  }
  async play(): Promise<void> {
    if (this.refuses) throw new DOMException('not allowed', 'NotAllowedError')
    this.paused = false
    this.ended = false
    if (this.readyState > 0) this.tell('playing')
  }
  pause(): void {
    if (this.paused) return
    this.paused = true
    this.tell('pause')
  }
  tell(type: string): void {
    this.dispatchEvent(new Event(type))
  }
  arrive(): void {
    this.readyState = 4
    this.duration = this.found
    this.tell('loadedmetadata')
    if (!this.paused) this.tell('playing')
  }
  land(): void {
    this.seeking = false
    this.tell('seeked')
  }
  break(code: number): void {
    this.error = { code }
    this.tell('error')
  }
  run(sec: number): void {
    if (this.seeking) this.land()
    if (this.paused || this.readyState === 0) return
    this.#time = Math.min(this.duration, this.#time + sec * this.playbackRate)
    this.tell('timeupdate')
    if (this.#time >= this.duration) {
      this.ended = true
      this.paused = true
      this.tell('pause')
      this.tell('ended')
    }
  }
}
