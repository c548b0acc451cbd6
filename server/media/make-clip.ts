// Makes the file of a passage: decodes what it needs of the recording, renders it, writes it.
import { mkdir, rename, stat } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { setImmediate as breathe } from 'node:timers/promises'
import { planClip } from '@shared/audio/clips/plan-clip.ts'
import { clipReach, renderClip, type ClipSound } from '@shared/audio/clips/render-clip.ts'
import type { ClipSettings } from '@shared/contracts/clips.ts'
import { err, ok, type Result } from '@shared/result.ts'
import { createBarMap } from '@shared/timing/bar-map.ts'
import type { BarMapBody } from '@shared/timing/types.ts'
import { clipCommand, type Sound } from './commands.ts'
import { decodeSource, soundOf } from './decode.ts'
import { mediaFault, storageError, type MediaFault } from './faults.ts'
import { startFfmpeg } from './ffmpeg.ts'
import { feed, interleave } from './frames.ts'
import { defaultMediaLimits } from './limits.ts'
import { probeSource, throwIfOurs, type Probe } from './probe.ts'
import { createWavWriter } from './wav-writer.ts'
import { linkSource, makeWorkFolder, removeFolder } from './work-folder.ts'

export type ClipStage = 'decoding' | 'rendering' | 'finishing'

/** Plain data: it goes to a process of its own. */
export type ClipOrder = {
  /** The take's recording as it was uploaded. */
  source: string
  /** Where the clip appears, whole or not at all; its folder is made. The work is done beside that folder. */
  target: string
  settings: ClipSettings
  barMap: BarMapBody | null
  gainDb: number
}

type Watch = { signal: AbortSignal; onProgress: (stage: ClipStage, fraction: number) => void }

/** Writes interleaved samples somewhere. */
type Sink = { write: (samples: Float32Array) => Promise<void>; close: () => Promise<void>; stop: () => Promise<void> }

const wavSink = async (path: string, sound: Sound, depth: 16 | 24): Promise<Sink> => {
  const wav = await createWavWriter(path, { ...sound, depth })
  return { write: wav.write, close: wav.close, stop: wav.close }
}

const encoderSink = (work: string, name: string, sound: Sound, sec: number, signal: AbortSignal): Sink => {
  const encoder = startFfmpeg(clipCommand(sound, name), {
    cwd: work,
    limits: {
      cpuSec: 60 + sec,
      // It waits for the renderer, which may be slow.
      wallSec: 600 + sec * 20,
      memoryBytes: defaultMediaLimits.memoryBytes,
      outputBytes: Math.ceil(sec) * 48_000 + (16 << 20)
    },
    signal,
    pipeIn: true
  })
  encoder.stdout.resume()
  return {
    write: async (samples) => {
      const bytes = Buffer.from(samples.buffer, samples.byteOffset, samples.byteLength)
      if (encoder.stdin) await feed(encoder.stdin, bytes)
    },
    close: async () => {
      encoder.stdin?.end()
      const exit = await encoder.exit
      throwIfOurs(exit, signal)
      if (exit.outcome !== 'done') throw new Error(`The clip's encoder ended as ${exit.outcome}: ${exit.stderr}`)
    },
    stop: async () => {
      encoder.stop()
      await encoder.exit
    }
  }
}

const openSink = (work: string, name: string, order: ClipOrder, probe: Probe, sec: number, signal: AbortSignal) => {
  const sound = soundOf(probe)
  return order.settings.format === 'wav'
    ? wavSink(join(work, name), sound, probe.depth)
    : encoderSink(work, name, sound, sec, signal)
}

const render = async (clip: ClipSound, sink: Sink, { signal, onProgress }: Watch): Promise<void> => {
  let frames = 0
  for (const block of renderClip(clip)) {
    const count = block[0]?.length ?? 0
    await sink.write(interleave(block, count))
    frames += count
    onProgress('rendering', frames / clip.plan.totalFrames)
    // So that a word from outside is heard between two blocks.
    await breathe()
    signal.throwIfAborted()
  }
}

const produce = async (work: string, order: ClipOrder, watch: Watch): Promise<Result<string, MediaFault>> => {
  const { settings, barMap, gainDb } = order
  const { signal, onProgress } = watch
  onProgress('decoding', 0)
  await linkSource(work, order.source)
  const probed = await probeSource(work, order.source, { signal })
  if (!probed.ok) return probed
  const { sampleRate } = probed.value
  const plan = planClip(settings, barMap && createBarMap(barMap), sampleRate)
  const reach = clipReach(sampleRate)
  const from = Math.max(0, Math.floor(plan.startFrame - reach.before))
  const to = Math.ceil(settings.span.endSec * sampleRate + reach.after)
  const decoded = await decodeSource(work, { probe: probed.value, only: { from, to }, signal })
  if (!decoded.ok) return decoded
  const source = decoded.value
  try {
    if (from + source.frames <= plan.startFrame) return err(mediaFault('truncated'))
    const name = 'clip'
    const sink = await openSink(work, name, order, probed.value, plan.totalFrames / sampleRate, signal)
    const { aids, clickLevel } = settings
    try {
      await render({ plan, aids, gainDb, clickLevel, source, sourceStart: from }, sink, watch)
    } catch (error) {
      await sink.stop()
      throw error
    }
    onProgress('finishing', 0)
    await sink.close()
    return ok(join(work, name))
  } finally {
    source.close()
  }
}

/**
 * Makes one clip. A fault of the recording comes back as such; being stopped, a full disk (`StorageFull`) and faults of the
 * server are thrown. Leaves nothing behind but a finished clip, and may be run again at any time.
 */
export const makeClip = async (order: ClipOrder, watch: Watch): Promise<Result<{ bytes: number }, MediaFault>> => {
  const clips = dirname(order.target)
  const work = await makeWorkFolder(dirname(clips))
  try {
    const made = await produce(work, order, watch)
    if (!made.ok) return made
    watch.signal.throwIfAborted()
    await mkdir(clips, { recursive: true, mode: 0o700 })
    await rename(made.value, order.target)
    return ok({ bytes: (await stat(order.target)).size })
  } catch (error) {
    throw storageError(error)
  } finally {
    await removeFolder(work)
  }
}
