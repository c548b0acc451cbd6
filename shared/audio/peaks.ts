// The peak file: true minimum and maximum of the decoded samples at several zooms, one level after the other.
import { err, ok, type Result } from '../result.ts'

/** Samples (per channel) in a bucket of each level, finest first. */
export const peakLevels = [256, 1024, 4096, 16384, 65536] as const

/** Size of the header in bytes; always the same, so one range request for it is enough. */
export const peakHeaderBytes = 128

/** Where one zoom of a peak file lies. */
export type PeakLevel = {
  /** Samples per channel in one bucket; the last bucket may cover fewer. */
  samplesPerBucket: number
  buckets: number
  /** Byte of the file at which the level begins. */
  offset: number
}

export type PeakHeader = { sampleRate: number; channels: number; frames: number; levels: PeakLevel[] }

/** Half-open range of bytes; an HTTP Range header names `end - 1`. */
export type ByteRange = { start: number; end: number }

const magic = 0x4b504c50 // "PLPK", little endian
const version = 1
const maxLevels = 6

/** Bytes of one bucket: minimum and maximum of each channel, 16 bit each. */
export const bucketBytes = (channels: number): number => channels * 4

/**
 * A sample as it is kept in a peak file: x times 32768, rounded and held within 16 bits. Samples that came from 16-bit
 * files are kept exactly; anything else within half a 16-bit step.
 */
export const toPeak = (sample: number): number => {
  const scaled = Math.round(sample * 32768)
  return scaled > 32767 ? 32767 : scaled < -32768 ? -32768 : scaled
}

/**
 * Lays out the levels of a recording of `frames` samples per channel.
 * Example: 512 frames in stereo give two buckets of 8 bytes in the finest level, which begins at byte 128.
 */
export const peakLayout = (sampleRate: number, channels: number, frames: number): PeakHeader => {
  let offset = peakHeaderBytes
  const levels = peakLevels.map((samplesPerBucket) => {
    const buckets = Math.ceil(frames / samplesPerBucket)
    const level = { samplesPerBucket, buckets, offset }
    offset += buckets * bucketBytes(channels)
    return level
  })
  return { sampleRate, channels, frames, levels }
}

/** Header as bytes: magic, version, channels, rate, frames, then one 16-byte row per level. Little endian. */
export const encodePeakHeader = (header: PeakHeader): Uint8Array => {
  const bytes = new Uint8Array(peakHeaderBytes)
  const view = new DataView(bytes.buffer)
  view.setUint32(0, magic, true)
  view.setUint16(4, version, true)
  view.setUint16(6, header.channels, true)
  view.setUint32(8, header.sampleRate, true)
  view.setUint32(12, header.levels.length, true)
  view.setFloat64(16, header.frames, true)
  header.levels.forEach((level, index) => {
    const at = 24 + index * 16
    view.setUint32(at, level.samplesPerBucket, true)
    view.setUint32(at + 4, level.buckets, true)
    view.setFloat64(at + 8, level.offset, true)
  })
  return bytes
}

/** Reads a header; `not-peaks` for anything that is not one (wrong magic or version, too short, impossible numbers). */
export const decodePeakHeader = (bytes: Uint8Array): Result<PeakHeader, 'not-peaks'> => {
  if (bytes.byteLength < peakHeaderBytes) return err('not-peaks')
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  const channels = view.getUint16(6, true)
  const levelCount = view.getUint32(12, true)
  if (view.getUint32(0, true) !== magic || view.getUint16(4, true) !== version) return err('not-peaks')
  if (channels < 1 || channels > 2 || levelCount < 1 || levelCount > maxLevels) return err('not-peaks')
  const sampleRate = view.getUint32(8, true)
  const frames = view.getFloat64(16, true)
  if (sampleRate < 1 || !Number.isSafeInteger(frames) || frames < 0) return err('not-peaks')
  const levels: PeakLevel[] = []
  for (let index = 0; index < levelCount; index++) {
    const at = 24 + index * 16
    const level = {
      samplesPerBucket: view.getUint32(at, true),
      buckets: view.getUint32(at + 4, true),
      offset: view.getFloat64(at + 8, true)
    }
    const sound = level.samplesPerBucket > 0 && Number.isSafeInteger(level.offset) && level.offset >= peakHeaderBytes
    if (!sound || level.buckets !== Math.ceil(frames / level.samplesPerBucket)) return err('not-peaks')
    levels.push(level)
  }
  return ok({ sampleRate, channels, frames, levels })
}

/** Length in bytes of the whole file that a header describes. */
export const peakFileBytes = (header: PeakHeader): number =>
  header.levels.reduce((end, level) => Math.max(end, level.offset + level.buckets * bucketBytes(header.channels)), 0)

/** The coarsest level that still has a bucket for every `samplesPerPixel`; the finest one when none has. */
export const levelForZoom = (header: PeakHeader, samplesPerPixel: number): PeakLevel | undefined =>
  header.levels.reduce<PeakLevel | undefined>(
    (best, level) => (best === undefined || level.samplesPerBucket <= samplesPerPixel ? level : best),
    undefined
  )

/** Bytes of the buckets `from` to `to` (half-open, held within the level) of one level; the whole level by default. */
export const bucketRange = (header: PeakHeader, level: PeakLevel, from = 0, to = level.buckets): ByteRange => {
  const size = bucketBytes(header.channels)
  const first = Math.min(Math.max(Math.floor(from), 0), level.buckets)
  const last = Math.min(Math.max(Math.ceil(to), first), level.buckets)
  return { start: level.offset + first * size, end: level.offset + last * size }
}

/**
 * Buckets as numbers from -1 to 1, one array per channel, minimum and maximum taking turns: `[min, max, min, max, ...]`.
 * This is also the shape a waveform view takes as samples. A half bucket at the end is left out.
 */
export const decodeBuckets = (bytes: Uint8Array, channels: number): Float32Array[] => {
  const buckets = Math.floor(bytes.byteLength / bucketBytes(channels))
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  return Array.from({ length: channels }, (_, channel) => {
    const out = new Float32Array(buckets * 2)
    for (let bucket = 0; bucket < buckets; bucket++) {
      const at = bucket * bucketBytes(channels) + channel * 4
      out[bucket * 2] = view.getInt16(at, true) / 32768
      out[bucket * 2 + 1] = view.getInt16(at + 2, true) / 32768
    }
    return out
  })
}
