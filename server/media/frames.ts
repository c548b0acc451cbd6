// Samples as they flow through pipes and files: 32-bit floats, interleaved.
import { once } from 'node:events'
import type { Writable } from 'node:stream'

/** Writes and waits while the pipe is full; a process that has ended lets go of the wait. */
export const feed = async (input: Writable, chunk: Buffer): Promise<void> => {
  if (input.destroyed || input.write(chunk)) return
  const over = new AbortController()
  const wait = (event: string) => once(input, event, { signal: over.signal }).catch(() => undefined)
  await Promise.race([wait('drain'), wait('close')])
  over.abort()
}

/** +24 dB of full scale: beyond it a damaged file speaks, and encoders refuse what is near infinity. */
const loudestSample = 16

/** In place: no sample beyond the loudest, and nothing that is no number. */
export const tame = (samples: Float32Array): void => {
  for (let at = 0; at < samples.length; at++) {
    const sample = samples[at] ?? 0
    if (!(sample <= loudestSample && sample >= -loudestSample)) {
      samples[at] = Number.isNaN(sample) ? 0 : Math.sign(sample) * loudestSample
    }
  }
}

/** Bytes from a pipe as whole frames of sound floats; what is left over waits for the next chunk. */
export const createFrameReader = (channels: number) => {
  const frameBytes = channels * 4
  let rest: Buffer = Buffer.alloc(0)
  return (chunk: Buffer): Float32Array => {
    const joined = rest.length === 0 ? chunk : Buffer.concat([rest, chunk])
    const whole = joined.length - (joined.length % frameBytes)
    rest = joined.subarray(whole)
    const samples =
      joined.byteOffset % 4 === 0
        ? new Float32Array(joined.buffer, joined.byteOffset, whole / 4)
        : new Float32Array(Uint8Array.from(joined.subarray(0, whole)).buffer)
    tame(samples)
    return samples
  }
}

/** The middle of one or two interleaved channels. */
export const toMono = (samples: Float32Array, channels: 1 | 2): Float32Array => {
  if (channels === 1) return samples
  const mono = new Float32Array(samples.length / 2)
  for (let i = 0; i < mono.length; i++) mono[i] = (samples[2 * i]! + samples[2 * i + 1]!) / 2
  return mono
}

/** Channels side by side as one array, frame after frame. */
export const interleave = (channels: readonly Float32Array[], frames: number): Float32Array => {
  const mixed = new Float32Array(frames * channels.length)
  channels.forEach((channel, c) => {
    for (let i = 0; i < frames; i++) mixed[i * channels.length + c] = channel[i] ?? 0
  })
  return mixed
}
