// Measures of a whole sound: spectrum against the source, length, energy, clipping, stereo image, onsets.
import { energySums, framePower, hann, middleChannel, phasorAt, powerDecibels } from './dsp.ts'
import type { KnownPitch } from './material.ts'
import { centsBetween, pitchNear } from './tone-measures.ts'
import type { Sound } from './wav.ts'
import { median } from '@shared/timing/statistics'
import { percentile } from '../statistics.ts'

const frameSize = 4096

/**
 * Log-spectral distance, decibels: frames of the source against those at the same place of the take in the output, Hann,
 * 4096 long, every 50 ms of the source; power floored `floorDb` below the source frame's peak; root mean square over the bins
 * below 10 kHz, mean over the frames that are within `floorDb` of the loudest.
 */
export const spectralDistance = (source: Sound, output: Sound, speed: number, floorDb: number): number => {
  const [a, b] = [middleChannel(source.channels), middleChannel(output.channels)]
  const rate = source.sampleRate
  const window = hann(frameSize)
  const top = Math.round((10_000 * frameSize) / rate)
  const peakOf = (power: Float64Array): number => power.reduce((most, value) => Math.max(most, value), 0)
  const frames: { at: number; power: Float64Array; peak: number }[] = []
  for (let at = 0; at + frameSize <= a.length; at += Math.round(0.05 * rate)) {
    const power = framePower(a, at, window)
    frames.push({ at, power, peak: peakOf(power) })
  }
  const loudest = frames.reduce((most, frame) => Math.max(most, frame.peak), 0)
  const distances = frames
    .filter((frame) => frame.peak > loudest * 10 ** (-floorDb / 10))
    .map(({ at, power, peak }) => {
      const middle = Math.round((at + frameSize / 2) / speed)
      const other = framePower(b, middle - frameSize / 2, window)
      const floor = peak * 10 ** (-floorDb / 10)
      let sum = 0
      for (let i = 1; i <= top; i += 1)
        sum += (powerDecibels((power[i] as number) + floor) - powerDecibels((other[i] as number) + floor)) ** 2
      return Math.sqrt(sum / top)
    })
  return distances.reduce((x, y) => x + y, 0) / Math.max(1, distances.length)
}

export interface WholeFigures {
  lengthMs: number
  energyDb: number
  peak: number
}

export const measureWhole = (source: Sound, output: Sound, speed: number): WholeFigures => {
  const power = (sound: Sound): number =>
    sound.channels.reduce((sum, channel) => sum + energySums(channel)(0, channel.length) / channel.length, 0)
  const frames = (source.channels[0]?.length ?? 0) / speed
  return {
    lengthMs: (((output.channels[0]?.length ?? 0) - frames) / source.sampleRate) * 1000,
    energyDb: powerDecibels(power(output) / power(source)),
    peak: output.channels.reduce((most, channel) => channel.reduce((a, b) => Math.max(a, Math.abs(b)), most), 0)
  }
}

export interface MixFigures {
  /** The furthest, cents. */
  cents: number
  /** The furthest difference of the left-to-right level of a known pitch, decibels. */
  image: number
}

/** Pitches of a mix that stand alone in the spectrum, each in the span in which it is steady. */
export const measureMix = (
  source: Sound,
  output: Sound,
  pitches: readonly KnownPitch[],
  speed: number,
  ratio: number
): MixFigures => {
  const rate = source.sampleRate
  const sided = (sound: Sound, hertz: number, from: number, to: number): number => {
    const [left, right] = sound.channels.map((channel) => {
      const { re, im } = phasorAt(channel, from, to - from, hertz / rate)
      return re * re + im * im
    })
    return powerDecibels((left ?? 1) / (right ?? 1))
  }
  const [before, after] = [middleChannel(source.channels), middleChannel(output.channels)]
  const alone = pitches.filter((one) =>
    pitches.every((other) => {
      if (other === one || other.toSec <= one.fromSec || other.fromSec >= one.toSec) return true
      return Array.from({ length: 24 }, (_, k) => (k + 1) * other.hertz).every(
        (hertz) => Math.abs(hertz / one.hertz - 1) > 0.05
      )
    })
  )
  const rows = alone.map(({ hertz, fromSec, toSec }) => {
    const inSource = { from: Math.round(fromSec * rate), to: Math.round(toSec * rate) }
    const inOutput = { from: Math.round((fromSec / speed) * rate), to: Math.round((toSec / speed) * rate) }
    const known = pitchNear(before, rate, hertz, inSource, 0.3).hertz
    const got = pitchNear(after, rate, hertz * ratio, inOutput, 0.3).hertz
    return {
      cents: Math.abs(centsBetween(got, known * ratio)),
      image: Math.abs(sided(output, got, inOutput.from, inOutput.to) - sided(source, known, inSource.from, inSource.to))
    }
  })
  return { cents: Math.max(...rows.map((row) => row.cents)), image: Math.max(...rows.map((row) => row.image)) }
}

/**
 * Onsets by spectral flux: 1024 Hann frames every 5 ms, differences of the logarithm of 1 + 5 x the bin's size over 15 ms, summed
 * where positive; peaks above the running median by a fifth of the 98th percentile, 30 ms x stretch apart.
 */
export const findOnsets = (sound: Sound, stretch: number): number[] => {
  const x = middleChannel(sound.channels)
  const rate = sound.sampleRate
  const hop = Math.round(0.005 * rate)
  const window = hann(1024)
  const lag = 3
  const logs: Float64Array[] = []
  for (let at = -512; at + 512 < x.length; at += hop)
    logs.push(framePower(x, at, window).map((power) => Math.log(1 + 5 * Math.sqrt(power))))
  const flux = logs.map((now, i) => {
    const before = logs[i - lag]
    return before ? now.reduce((sum, value, bin) => sum + Math.max(0, value - (before[bin] as number)), 0) : 0
  })
  const least = 0.2 * percentile(flux, 0.98)
  const reach = Math.round((0.03 * stretch) / 0.005)
  const around = Math.round((0.1 * stretch) / 0.005)
  const found: number[] = []
  flux.forEach((value, i) => {
    const near = flux.slice(Math.max(0, i - reach), i + reach + 1)
    if (value < Math.max(...near) || near.indexOf(value) !== Math.min(i, reach)) return
    const floor = median(flux.slice(Math.max(0, i - around), i + around + 1)) ?? 0
    if (value > floor + least) found.push(((i - lag / 2) * hop) / rate)
  })
  return found
}

export interface OnsetMatch {
  f1: number
  /** Of the matched ones, output less expected, seconds. */
  late: number[]
}

/** Greedy in order of time: each at most once, within `tolerance` seconds. */
export const matchOnsets = (expected: readonly number[], got: readonly number[], tolerance: number): OnsetMatch => {
  const late: number[] = []
  let next = 0
  for (const want of expected) {
    while (next < got.length && (got[next] as number) < want - tolerance) next += 1
    const now = got[next]
    if (now !== undefined && now <= want + tolerance) {
      late.push(now - want)
      next += 1
    }
  }
  return { f1: (2 * late.length) / Math.max(1, expected.length + got.length), late }
}
