// Recordings made while the tests run, with ffmpeg's own sources: no audio is kept in the repository.
import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { onTestFinished } from 'vitest'

export const makeScratch = (): string => mkdtempSync(join(tmpdir(), 'plumbline-media-'))

/** A folder that is gone when the running test is over. */
export const scratchFolder = (): string => {
  const folder = makeScratch()
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }))
  return folder
}

const run = (program: string, args: string[], input?: Uint8Array): Buffer =>
  execFileSync(program, args, { input, maxBuffer: 1 << 30, stdio: ['pipe', 'pipe', 'pipe'] })

export const ffmpeg = (...args: string[]): Buffer =>
  run('ffmpeg', ['-nostdin', '-hide_banner', '-loglevel', 'error', '-y', ...args])

/** Plucked low tones with noisy attacks, the two sides different: something whose place in time can be told. */
export const pluckedBass = (seconds: number, rate = 44_100): string[] => {
  const decay = '0.4*exp(-6*mod(t,0.5))'
  const tone = 'sin(2*PI*55*(1+floor(mod(t,4)/0.5)*0.0595)*t)+0.5*sin(2*PI*110*t)'
  const noise = (seed: number) => `0.1*exp(-40*mod(t,0.25))*(random(${seed})-0.5)`
  const [left, right] = [`${decay}*(${tone})+${noise(0)}`, `0.8*${decay}*(${tone})+${noise(1)}`]
  return ['-f', 'lavfi', '-i', `aevalsrc='${left}|${right}':s=${rate}:d=${seconds}`]
}

export const sine = (hertz: number, seconds: number, rate = 44_100): string[] => [
  '-f',
  'lavfi',
  '-i',
  `aevalsrc='0.5*sin(2*PI*${hertz}*t)|0.5*sin(2*PI*${hertz}*t)':s=${rate}:d=${seconds}`
]

/** Every kind of recording that is accepted, with the options that make it. */
export const acceptedFormats: Record<string, { name: string; options: string[] }> = {
  'wav, 16 bit': { name: 'a.wav', options: [] },
  'wav, 24 bit': { name: 'b.wav', options: ['-c:a', 'pcm_s24le'] },
  'wav, 32-bit float': { name: 'c.wav', options: ['-c:a', 'pcm_f32le'] },
  flac: { name: 'd.flac', options: [] },
  'mp3, constant rate': { name: 'e.mp3', options: ['-b:a', '192k'] },
  'mp3, variable rate': { name: 'f.mp3', options: ['-q:a', '4'] },
  'm4a with AAC': { name: 'g.m4a', options: ['-c:a', 'aac'] },
  'm4a with ALAC': { name: 'h.m4a', options: ['-c:a', 'alac'] },
  'raw AAC': { name: 'i.aac', options: ['-c:a', 'aac', '-f', 'adts'] },
  'Ogg Opus': { name: 'j.ogg', options: ['-c:a', 'libopus'] },
  'Ogg Vorbis': { name: 'k.ogg', options: ['-c:a', 'libvorbis'] },
  'WebM with Opus': { name: 'l.webm', options: ['-c:a', 'libopus'] },
  aiff: { name: 'm.aiff', options: [] }
}

export const makeRecording = (folder: string, name: string, source: string[], ...options: string[]): string => {
  const path = join(folder, name)
  ffmpeg(...source, ...options, path)
  return path
}

/** WebM as a browser's recorder writes it: to a stream it cannot go back in, so no duration in the header. */
export const makeLiveWebm = (folder: string, source: string[]): string => {
  const path = join(folder, 'live.webm')
  writeFileSync(path, ffmpeg(...source, '-c:a', 'libopus', '-f', 'webm', '-live', '1', 'pipe:1'))
  return path
}

/** Decoded samples, interleaved floats, in ffmpeg's own words of rate and channels. */
export const decode = (path: string, ...options: string[]): Float32Array => {
  const bytes = ffmpeg('-i', path, ...options, '-f', 'f32le', 'pipe:1')
  return new Float32Array(Uint8Array.from(bytes).buffer)
}

/** ffprobe's answer to one question. */
export const ffprobe = (path: string, entries: string): string =>
  run('ffprobe', ['-loglevel', 'error', '-show_entries', entries, '-of', 'default=nk=1:nw=1', path]).toString().trim()
