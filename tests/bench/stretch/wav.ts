// Wav files in and out for programs that are run from outside: written as 16 bit, read through ffmpeg.
import { writeFileSync } from 'node:fs'
import { ffmpeg } from '../../support/media.ts'

export interface Sound {
  sampleRate: number
  channels: Float32Array[]
}

export const writeWav = (path: string, { channels, sampleRate }: Sound): void => {
  const frames = channels[0]?.length ?? 0
  const bytes = Buffer.alloc(44 + frames * channels.length * 2)
  bytes.write('RIFF', 0)
  bytes.writeUInt32LE(bytes.length - 8, 4)
  bytes.write('WAVEfmt ', 8)
  bytes.writeUInt32LE(16, 16)
  bytes.writeUInt16LE(1, 20)
  bytes.writeUInt16LE(channels.length, 22)
  bytes.writeUInt32LE(sampleRate, 24)
  bytes.writeUInt32LE(sampleRate * channels.length * 2, 28)
  bytes.writeUInt16LE(channels.length * 2, 32)
  bytes.writeUInt16LE(16, 34)
  bytes.write('data', 36)
  bytes.writeUInt32LE(bytes.length - 44, 40)
  let at = 44
  for (let i = 0; i < frames; i += 1)
    for (const channel of channels) {
      const value = Math.round((channel[i] ?? 0) * 32_767)
      bytes.writeInt16LE(Math.max(-32_768, Math.min(32_767, value)), at)
      at += 2
    }
  writeFileSync(path, bytes)
}

/** Any audio that ffmpeg reads, at the rate asked for. */
export const readSound = (path: string, sampleRate: number, channels: number): Sound => {
  const raw = ffmpeg('-i', path, '-f', 'f32le', '-ac', String(channels), '-ar', String(sampleRate), '-')
  const frames = Math.floor(raw.length / 4 / channels)
  const out = Array.from({ length: channels }, () => new Float32Array(frames))
  for (let i = 0; i < frames; i += 1)
    out.forEach((channel, c) => {
      channel[i] = raw.readFloatLE((i * channels + c) * 4)
    })
  return { sampleRate, channels: out }
}
