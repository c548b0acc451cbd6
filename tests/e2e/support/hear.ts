// What leaves a page for the loudspeaker, with the moment of each sample, and how far two pages are apart.
import type { Page } from 'playwright-core'

/** Samples a second after thinning: a tenth of a thousandth is far below what is asked for. */
const heardRate = 8000

export interface Heard {
  /** ms since 1970 of the first sample. */
  atMs: number
  samples: Float32Array
}

/** Runs in the page before its own scripts: everything connected to the destination is also kept, for the last seconds. */
export const hearScript = `(() => {
  const keepSec = 8
  const connect = AudioNode.prototype.connect
  const taps = []
  AudioNode.prototype.connect = function (to, ...rest) {
    const answer = connect.call(this, to, ...rest)
    if (to !== this.context.destination || !(this.context instanceof AudioContext)) return answer
    const context = this.context
    const every = Math.round(context.sampleRate / ${heardRate})
    const writer = context.createScriptProcessor(2048, 1, 1)
    const mute = context.createGain()
    mute.gain.value = 0
    const tap = { context, blocks: [], offsets: [] }
    writer.onaudioprocess = ({ inputBuffer, playbackTime }) => {
      const input = inputBuffer.getChannelData(0)
      const samples = new Float32Array(Math.floor(input.length / every))
      for (let n = 0; n < samples.length; n += 1) {
        let sum = 0
        for (let k = 0; k < every; k += 1) sum += input[n * every + k]
        samples[n] = sum / every
      }
      const stamp = context.getOutputTimestamp()
      const nowMs = performance.timeOrigin + (stamp.performanceTime > 0 ? stamp.performanceTime : performance.now())
      tap.offsets.push(nowMs - (stamp.performanceTime > 0 ? stamp.contextTime : context.currentTime) * 1000)
      tap.blocks.push({ at: playbackTime, step: every / context.sampleRate, samples })
      const most = (keepSec * context.sampleRate) / input.length
      if (tap.blocks.length > most) {
        tap.blocks.shift()
        tap.offsets.shift()
      }
    }
    connect.call(this, writer)
    connect.call(writer, mute)
    connect.call(mute, context.destination)
    taps.push(tap)
    return answer
  }
  window.heardOf = (sec) => {
    const tap = taps.filter(({ context }) => context.state === 'running').at(-1)
    if (!tap) return null
    const offset = [...tap.offsets].sort((a, b) => a - b)[Math.floor(tap.offsets.length / 2)]
    const last = tap.blocks.at(-1)
    const blocks = tap.blocks.filter(({ at }) => at > last.at - sec)
    const samples = blocks.flatMap(({ samples }) => Array.from(samples, (x) => Math.round(x * 30000)))
    return { atMs: offset + blocks[0].at * 1000, samples }
  }
})()`

export const heardOf = async (page: Page, sec: number): Promise<Heard> => {
  const heard = await page.evaluate(
    (wanted) =>
      (window as unknown as { heardOf(sec: number): { atMs: number; samples: number[] } | null }).heardOf(wanted),
    sec
  )
  if (!heard) throw new Error('nothing sounds in this page')
  return { atMs: heard.atMs, samples: Float32Array.from(heard.samples, (x) => x / 30_000) }
}

export const loudness = ({ samples }: Heard): number =>
  Math.sqrt(samples.reduce((sum, x) => sum + x * x, 0) / Math.max(1, samples.length))

const frame = heardRate / 500

/** Where notes begin: rises of the sound's energy, one value for 2 ms. */
const onsets = ({ samples }: Heard): Float32Array => {
  const energy = new Float32Array(Math.floor(samples.length / frame))
  for (let n = 0; n < energy.length; n += 1)
    energy[n] = Math.log(1e-5 + samples.subarray(n * frame, (n + 1) * frame).reduce((sum, x) => sum + x * x, 0) / frame)
  // Over 8 ms, so that a stretched attack is still one rise.
  return energy.map((value, n) => Math.max(0, value - (energy[n - 4] ?? value)))
}

/** How much later than `a` the same music sounds in `b`, ms, looked for within 300 ms. */
export const offsetMs = (a: Heard, b: Heard): number => {
  const [one, two] = [onsets(a), onsets(b)]
  const startMs = Math.max(a.atMs, b.atMs)
  const shift = (heard: Heard): number => Math.round((startMs - heard.atMs) / 2)
  const [from, to] = [shift(a), shift(b)]
  const length = Math.min(one.length - from, two.length - to) - 150
  let best = { lag: 0, score: -1 }
  for (let lag = -150; lag <= 150; lag += 1) {
    let score = 0
    for (let n = 150; n < length; n += 1) score += (one[from + n] ?? 0) * (two[to + n + lag] ?? 0)
    if (score > best.score) best = { lag, score }
  }
  if (length < 300) throw new Error(`only ${length * 2} ms were heard in both pages`)
  return best.lag * 2
}
