// Hands what comes in to the page, in blocks stamped with the context's own frame count.

/** Some 85 ms at 48 kHz: also the page's beat, which unlike a timer does not sleep in the background. */
const blockFrames = 4096

registerProcessor(
  'plumbline-capture',
  class extends AudioWorkletProcessor {
    #channels: Float32Array<ArrayBuffer>[] = []
    #filled = 0
    #frame = 0

    constructor() {
      super()
      // The last bit is asked for. Set in this way the port needs no start.
      // oxlint-disable-next-line unicorn/prefer-add-event-listener
      this.port.onmessage = () => {
        this.#send()
        this.port.postMessage({ kind: 'end' }, [])
      }
    }

    #send(): void {
      if (this.#filled === 0) return
      const channels = this.#channels.map((channel) => channel.slice(0, this.#filled))
      this.port.postMessage(
        { kind: 'block', frame: this.#frame, channels },
        channels.map(({ buffer }) => buffer)
      )
      this.#filled = 0
    }

    process([input = []]: Float32Array[][], [output = []]: Float32Array[][]): boolean {
      const frames = output[0]?.length ?? 128
      const count = Math.max(1, input.length)
      // Time that stood still (a suspended context), or a stream that changed its channels: another block.
      if (currentFrame !== this.#frame + this.#filled || count !== this.#channels.length) {
        this.#send()
        this.#channels = Array.from({ length: count }, () => new Float32Array(blockFrames))
      }
      if (this.#filled === 0) this.#frame = currentFrame
      this.#channels.forEach((channel, index) => {
        const samples = input[index]
        if (samples) channel.set(samples, this.#filled)
        else channel.fill(0, this.#filled, this.#filled + frames)
      })
      this.#filled += frames
      if (this.#filled >= blockFrames) this.#send()
      return true
    }
  }
)
