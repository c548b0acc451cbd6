// Decodes a recording into a file of floats, from which it is rendered.
import { join } from 'node:path'
import { err, ok, type Result } from '@shared/result.ts'
import { decodeCommand, type FrameRange, type Sound } from './commands.ts'
import { mediaFault, type MediaFault } from './faults.ts'
import { startFfmpeg } from './ffmpeg.ts'
import { defaultMediaLimits, type MediaLimits } from './limits.ts'
import { throwIfOurs, type Probe } from './probe.ts'
import { openSoundFile, type SoundFile } from './sound-file.ts'

const soundName = 'sound.f32'

export type DecodeOptions = {
  probe: Probe
  /** All of it without. */
  only?: FrameRange
  limits?: Partial<MediaLimits>
  signal?: AbortSignal | undefined
}

/** More channels than two are mixed down. */
export const soundOf = (probe: Probe): Sound => ({
  sampleRate: probe.sampleRate,
  channels: probe.channels === 1 ? 1 : 2
})

/** Decodes the work folder's `source`, start and end padding of its format left out. Close what comes back. */
export const decodeSource = async (folder: string, options: DecodeOptions): Promise<Result<SoundFile, MediaFault>> => {
  const { probe, only, signal } = options
  const bounds = { ...defaultMediaLimits, ...options.limits }
  const sound = soundOf(probe)
  const maxSec = only ? only.to / sound.sampleRate + 1 : bounds.maxDurationSec + 1
  const sec = Math.min(maxSec, probe.durationFrom === 'header' ? probe.durationSec * 1.1 : bounds.maxDurationSec)
  const decoder = startFfmpeg(decodeCommand(sound, maxSec, { output: soundName, only }), {
    cwd: folder,
    limits: {
      cpuSec: 60 + sec * 0.3,
      wallSec: 120 + sec * 2,
      memoryBytes: bounds.memoryBytes,
      outputBytes: Math.ceil(maxSec) * sound.sampleRate * sound.channels * 4 + (1 << 20)
    },
    signal
  })
  // Nothing comes out of it, but a pipe that nobody reads never closes.
  decoder.stdout.resume()
  const exit = await decoder.exit
  throwIfOurs(exit, signal)
  if (exit.outcome === 'too-slow') return err(mediaFault('too-heavy'))
  if (exit.outcome === 'too-large') return err(mediaFault('too-long'))
  if (exit.outcome !== 'done') return err(mediaFault('truncated'))
  const file = openSoundFile(join(folder, soundName), sound)
  if (file.frames > 0) return ok(file)
  file.close()
  return err(mediaFault('empty'))
}
