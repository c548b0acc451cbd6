// Makes a stretched copy of a whole recording as a WAV: what the command line gives.
import { open, rename } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { createLimiter } from '@shared/audio/aids/limiter.ts'
import { pitchRatio, type StretchSettings } from '@shared/audio/stretch/offline.ts'
import { createStretcher } from '@shared/audio/stretch/stretcher.ts'
import type { SampleSource } from '@shared/audio/stretch/types.ts'
import { err, ok, type Result } from '@shared/result.ts'
import { decodeSource } from './decode.ts'
import { mediaFault, storageError, type MediaFault } from './faults.ts'
import { interleave } from './frames.ts'
import { probeSource, type Probe } from './probe.ts'
import { openSoundFile } from './sound-file.ts'
import { createWavWriter, fitsWav } from './wav-writer.ts'
import { linkSource, makeWorkFolder, removeFolder } from './work-folder.ts'

export type StretchJob = StretchSettings & { source: string; target: string; signal?: AbortSignal }

/** What was done so that nothing clips. */
export type Stretched = { frames: number; loweredDb: number; isLimited: boolean }

const blockFrames = 1 << 15
const limits = { maxDurationSec: 24 * 3600, minDurationSec: 0 }
/** A result that is too loud is brought here, true peaks included where it is limited. */
const ceilingDb = -0.1
const mostLoweredDb = 1

/** Renders into a file of floats, because only the whole says how loud its loudest sample is. */
const render = async (
  source: SampleSource,
  path: string,
  job: StretchJob
): Promise<{ frames: number; peak: number }> => {
  const frames = Math.round(source.frames / job.speed)
  const stretcher = createStretcher(source)
  stretcher.schedule({
    outFrame: 0,
    sourceFrame: 0,
    speed: job.speed,
    ratio: pitchRatio(job.semitones + (job.cents ?? 0) / 100)
  })
  const file = await open(path, 'w')
  let peak = 0
  try {
    for (let done = 0; done < frames;) {
      const out = Array.from({ length: source.channels }, () => new Float32Array(Math.min(blockFrames, frames - done)))
      const count = stretcher.render(out, 0, out[0]?.length ?? 0)
      if (count === 0) throw new Error('The stretcher gave nothing')
      const mixed = interleave(out, count)
      for (const sample of mixed) peak = Math.max(peak, Math.abs(sample))
      await file.appendFile(new Uint8Array(mixed.buffer))
      done += count
      job.signal?.throwIfAborted()
    }
  } finally {
    await file.close()
  }
  return { frames, peak }
}

/** Writes the WAV; `gain` first, then what is still too loud is limited. */
const write = async (
  sound: SampleSource,
  path: string,
  { depth, gain, isLimited }: { depth: 16 | 24; gain: number; isLimited: boolean }
): Promise<void> => {
  const { sampleRate, channels, frames } = sound
  const wav = await createWavWriter(path, { sampleRate, channels, depth })
  const limiter = isLimited ? createLimiter(sampleRate, { channels, ceilingDb }) : null
  const late = limiter?.delayFrames ?? 0
  try {
    for (let at = 0; at < frames + late; at += blockFrames) {
      const block = Array.from({ length: channels }, () => new Float32Array(Math.min(blockFrames, frames + late - at)))
      sound.read(at, block)
      const count = block[0]?.length ?? 0
      if (gain !== 1) for (const channel of block) for (let i = 0; i < count; i++) channel[i] = (channel[i] ?? 0) * gain
      limiter?.process(block, 0, count)
      const skip = Math.min(count, Math.max(0, late - at))
      await wav.write(
        interleave(
          block.map((channel) => channel.subarray(skip)),
          count - skip
        )
      )
    }
  } finally {
    await wav.close()
  }
}

const finish = async (work: string, probe: Probe, source: SampleSource, job: StretchJob): Promise<Stretched> => {
  const path = join(work, 'stretched.f32')
  const { frames, peak } = await render(source, path, job)
  const wantedDb = peak > 1 ? 20 * Math.log10(peak) - ceilingDb : 0
  const loweredDb = Math.min(mostLoweredDb, wantedDb)
  const isLimited = wantedDb > mostLoweredDb
  const stretched = openSoundFile(path, { sampleRate: source.sampleRate, channels: source.channels === 1 ? 1 : 2 })
  const made = join(work, 'made.wav')
  try {
    await write(stretched, made, { depth: probe.depth, gain: 10 ** (-loweredDb / 20), isLimited })
  } finally {
    stretched.close()
  }
  await rename(made, job.target)
  return { frames, loweredDb, isLimited }
}

/**
 * Stretches the recording at `source` into `target`, which appears whole or stays what it was. 16 bit, or 24 where the
 * recording holds more than 16. At speed 1 and unshifted every sample is the recording's own. Works in a folder beside the
 * target, with a few megabytes of memory whatever the length.
 */
export const stretchRecording = async (job: StretchJob): Promise<Result<Stretched, MediaFault>> => {
  const { source, target, signal } = job
  const work = await makeWorkFolder(dirname(target))
  try {
    await linkSource(work, source)
    const probed = await probeSource(work, source, { signal, limits })
    if (!probed.ok) return probed
    const decoded = await decodeSource(work, { probe: probed.value, limits, signal })
    if (!decoded.ok) return decoded
    try {
      const { sampleRate, channels, frames } = decoded.value
      if (!fitsWav(frames / job.speed, { sampleRate, channels, depth: probed.value.depth }))
        return err(mediaFault('too-long'))
      return ok(await finish(work, probed.value, decoded.value, job))
    } finally {
      decoded.value.close()
    }
  } catch (error) {
    throw storageError(error)
  } finally {
    await removeFolder(work)
  }
}
