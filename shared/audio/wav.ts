// 24-bit PCM in the RIFF WAVE format (Microsoft and IBM, "Multimedia Programming Interface and Data Specifications 1.0", 1991).

export const wavHeaderBytes = 44
export const wavSampleBytes = 3

/** The head of a file of so many frames; its samples follow, channel by channel within a frame. */
export const wavHeader = (sampleRate: number, channels: number, frames: number): Uint8Array<ArrayBuffer> => {
  const bytes = frames * channels * wavSampleBytes
  const head = new DataView(new ArrayBuffer(wavHeaderBytes))
  const text = (at: number, words: string): void =>
    [...words].forEach((letter, n) => head.setUint8(at + n, letter.charCodeAt(0)))
  text(0, 'RIFF')
  head.setUint32(4, wavHeaderBytes - 8 + bytes + (bytes % 2), true)
  text(8, 'WAVEfmt ')
  head.setUint32(16, 16, true)
  head.setUint16(20, 1, true)
  head.setUint16(22, channels, true)
  head.setUint32(24, sampleRate, true)
  head.setUint32(28, sampleRate * channels * wavSampleBytes, true)
  head.setUint16(32, channels * wavSampleBytes, true)
  head.setUint16(34, wavSampleBytes * 8, true)
  text(36, 'data')
  head.setUint32(40, bytes, true)
  return new Uint8Array(head.buffer)
}

/** Samples of -1 to 1 as 24-bit little-endian, frame by frame; what is louder is cut off, what is no number is silence. */
export const wavSamples = (channels: readonly Float32Array[]): Uint8Array<ArrayBuffer> => {
  const frames = channels[0]?.length ?? 0
  const bytes = new Uint8Array(frames * channels.length * wavSampleBytes)
  let at = 0
  for (let n = 0; n < frames; n += 1)
    for (const channel of channels) {
      const sample = channel[n] as number
      const value = Math.max(-0x80_00_00, Math.min(0x7f_ff_ff, Math.round(sample * 0x80_00_00))) || 0
      bytes[at] = value & 0xff
      bytes[at + 1] = (value >> 8) & 0xff
      bytes[at + 2] = (value >> 16) & 0xff
      at += wavSampleBytes
    }
  return bytes
}
