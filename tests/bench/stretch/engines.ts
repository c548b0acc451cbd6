// Who stretches: our own core in this process, or any program that reads and writes a file.
import { execFileSync } from 'node:child_process'
import { existsSync, mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { type Change, ratioOf } from './cases.ts'
import { readSound, type Sound, writeWav } from './wav.ts'

export type Engine = (source: Sound, change: Change, name: string) => Promise<Sound>

/** The whole take in, the whole stretched take out. */
type StretchSamples = (
  channels: Float32Array[],
  sampleRate: number,
  change: Change
) => Float32Array[] | Promise<Float32Array[]>

const offlinePath = '../../../shared/audio/stretch/offline.ts'

export const ownEngine = async (): Promise<Engine> => {
  const { stretchSamples } = (await import(offlinePath)) as { stretchSamples: StretchSamples }
  return async ({ channels, sampleRate }, change) => ({
    sampleRate,
    channels: await stretchSamples(channels, sampleRate, change)
  })
}

/** Programs to compare with, and our own from its command line. */
export const commands: Record<string, string> = {
  rubberband: 'rubberband -3 -q -t {stretch} -f {ratio} {in} {out}',
  rubberband2: 'rubberband -2 -q -t {stretch} -f {ratio} {in} {out}',
  soundstretch: 'soundstretch {in} {out} -tempo={tempo} -pitch={pitch}',
  cli: 'npm run --silent stretch -- {in} {out} --speed {speed} --semitones {semitones} --cents {cents}'
}

/** `isReused`: what an earlier run left in the folder is judged again. */
export const programEngine =
  (template: string, folder: string, isReused: boolean): Engine =>
  async (source, change, name) => {
    mkdirSync(folder, { recursive: true })
    const base = join(folder, name.replace(/[^\w.+-]+/g, '-'))
    const [from, to] = [`${base}-in.wav`, `${base}-out.wav`]
    if (isReused && existsSync(to)) return readSound(to, source.sampleRate, source.channels.length)
    writeWav(from, source)
    const words: Record<string, string> = {
      in: from,
      out: to,
      stretch: String(1 / change.speed),
      ratio: String(ratioOf(change)),
      tempo: String((change.speed - 1) * 100),
      pitch: String(change.semitones + change.cents / 100),
      speed: String(change.speed),
      semitones: String(change.semitones),
      cents: String(change.cents)
    }
    const [program = '', ...args] = template
      .split(/\s+/)
      .map((word) => word.replace(/\{(\w+)\}/g, (_, key: string) => words[key] ?? ''))
    execFileSync(program, args, { stdio: ['ignore', 'ignore', 'pipe'] })
    return readSound(to, source.sampleRate, source.channels.length)
  }

/** Nothing done at all: what the judge must pass at speed 1. */
export const identity: Engine = async (source) => source
