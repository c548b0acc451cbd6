// Turns a recording into what the desk plays and draws: rendition, pieces, loudness, tuning, peaks. The file is decoded once.
import { mkdir, readFile, rm, stat, writeFile } from 'node:fs/promises'
import { basename, dirname, join } from 'node:path'
import type { PieceManifest } from '@shared/audio/piece-manifest.ts'
import type { PeakLevel } from '@shared/audio/peaks.ts'
import { createTuningFinder, type TuningFinder } from '@shared/audio/tuning.ts'
import { err, ok, type Result } from '@shared/result.ts'
import { decodeCommand, piecesCommand, renditionCommand, renditionFile, renditionMime, type Sound } from './commands.ts'
import { mediaFault, storageError, type MediaFault } from './faults.ts'
import { sourceName, startFfmpeg, type Exit, type MediaProcess, type ProcessLimits } from './ffmpeg.ts'
import { createFrameReader, feed, toMono } from './frames.ts'
import { defaultMediaLimits, silenceThreshold, type MediaLimits } from './limits.ts'
import { readLoudness, type Loudness } from './loudness.ts'
import { createPeaksWriter } from './peaks-writer.ts'
import { cutPieces } from './pieces.ts'
import { probeSource, throwIfOurs, type Probe } from './probe.ts'
import { linkSource, makeWorkFolder, publishFolder, removeFolder, sweepOrphans } from './work-folder.ts'

export type IngestStage = 'probing' | 'decoding' | 'finishing'

export type IngestOptions = {
  /** The recording. Its name is never given to another program. */
  source: string
  /** Folder that will hold the result; it appears whole or not at all. Give each take a parent folder of its own. */
  outDir: string
  signal?: AbortSignal
  onProgress?: (stage: IngestStage, fraction: number) => void
  limits?: Partial<MediaLimits>
}

/** File names are relative to the result's folder; pieces lie in `pieces/`. */
export type IngestResult = {
  durationSec: number
  sampleRate: number
  channels: 1 | 2
  loudness: Loudness
  /** Above or below A 440, to a tenth; null when it cannot be told. */
  tuningCents: number | null
  rendition: { file: string; mime: string; bytes: number }
  peaks: { file: string; bytes: number; levels: PeakLevel[] }
  manifest: PieceManifest
}

/** What was finished before tunings were listened for has none. */
type EarlierResult = Omit<IngestResult, 'tuningCents'> & Partial<Pick<IngestResult, 'tuningCents'>>

export const resultFile = 'result.json'
export const peaksFile = 'peaks.bin'
export const piecesFolder = 'pieces'

type Job = IngestOptions & { work: string; sound: Sound; probe: Probe; bounds: MediaLimits }

/** The finished result in `outDir`, or none. */
export const readIngestResult = async (outDir: string): Promise<IngestResult | undefined> => {
  const text = await readFile(join(outDir, resultFile), 'utf8').catch(() => undefined)
  if (text === undefined) return undefined
  const found = JSON.parse(text) as EarlierResult
  return { tuningCents: null, ...found }
}

const processLimits = ({ probe, bounds }: Job, outputBytes: number): ProcessLimits => {
  const sec = probe.durationFrom === 'header' ? probe.durationSec * 1.1 : bounds.maxDurationSec
  return { cpuSec: 60 + sec * 0.3, wallSec: 120 + sec * 2, memoryBytes: bounds.memoryBytes, outputBytes }
}

type Peaks = Awaited<ReturnType<typeof createPeaksWriter>>
/** Whoever only listens while the recording passes. */
type Listeners = { peaks: Peaks; tuning: TuningFinder }

/** Hands what the decoder gives to the peaks, the tuning and both encoders. Stops early when the file is not worth going on. */
const distribute = async (job: Job, decoder: MediaProcess, encoders: MediaProcess[], listeners: Listeners) => {
  const { sound, probe, bounds, onProgress } = job
  const { peaks, tuning } = listeners
  const toFrames = createFrameReader(sound.channels)
  let told = 0
  for await (const chunk of decoder.stdout as AsyncIterable<Buffer>) {
    const samples = toFrames(chunk)
    const bytes = Buffer.from(samples.buffer, samples.byteOffset, samples.byteLength)
    await peaks.push(samples)
    tuning.push(toMono(samples, sound.channels))
    await Promise.all(encoders.map(({ stdin }) => stdin && feed(stdin, bytes)))
    const sec = peaks.frames() / sound.sampleRate
    if (sec > bounds.maxDurationSec) return mediaFault('too-long')
    if (sec > bounds.maxLeadingSilenceSec && peaks.loudest() < silenceThreshold) return mediaFault('silent')
    const fraction = Math.min(1, sec / probe.durationSec)
    if (fraction >= told + 0.01) onProgress?.('decoding', (told = fraction))
  }
  return undefined
}

/** What the decoded sound says about the file. A hundredth of a long recording, or half a second, may be missing. */
const faultOfSound = ({ probe, sound, bounds }: Job, exit: Exit, peaks: Peaks): MediaFault | undefined => {
  const sec = peaks.frames() / sound.sampleRate
  if (exit.outcome === 'too-slow') return mediaFault('too-heavy')
  if (sec < bounds.minDurationSec) return mediaFault(exit.outcome === 'done' ? 'empty' : 'truncated')
  if (probe.durationSec - sec > Math.max(0.5, probe.durationSec * 0.01)) return mediaFault('truncated')
  return peaks.loudest() < silenceThreshold ? mediaFault('silent') : undefined
}

const requireDone = (name: string, exit: Exit): void => {
  if (exit.outcome !== 'done') throw new Error(`The ${name} encoder ended as ${exit.outcome}: ${exit.stderr}`)
}

/** An encode may take as much room as its bit rate needs over the longest recording, and half as much again. */
const renditionBytes = (bounds: MediaLimits): number => bounds.maxDurationSec * 36_000 + (16 << 20)

const encode = async (job: Job, peaks: Peaks): Promise<Result<IngestResult, MediaFault>> => {
  const { work, sound, bounds, signal } = job
  const listeners = { peaks, tuning: createTuningFinder(sound.sampleRate) }
  const options = (outputBytes: number) => ({ cwd: work, limits: processLimits(job, outputBytes), signal })
  const decoder = startFfmpeg(decodeCommand(sound, bounds.maxDurationSec + 1), options(1 << 20))
  const rendition = startFfmpeg(renditionCommand(sound), { ...options(renditionBytes(bounds)), pipeIn: true })
  const opus = startFfmpeg(piecesCommand(sound), { ...options(1 << 20), pipeIn: true }, 'info')
  const processes = [decoder, rendition, opus]
  try {
    const cutting = cutPieces(opus.stdout, join(work, piecesFolder), sound.channels)
    // Its fault is looked at below; until then it must not count as unhandled.
    cutting.catch(() => opus.stop())
    const early = await distribute(job, decoder, [rendition, opus], listeners)
    if (early !== undefined) return err(early)
    const decoded = await decoder.exit
    throwIfOurs(decoded, signal)
    const fault = faultOfSound(job, decoded, peaks)
    if (fault !== undefined) return err(fault)
    job.onProgress?.('finishing', 0)
    rendition.stdin?.end()
    opus.stdin?.end()
    const [made, cut] = await Promise.all([rendition.exit, opus.exit])
    for (const exit of [made, cut]) throwIfOurs(exit, signal)
    requireDone('rendition', made)
    const manifest = await cutting
    requireDone('piece', cut)
    return ok(await assemble(job, listeners, manifest, cut.stderr))
  } finally {
    for (const process of processes) process.stop()
    await Promise.allSettled(processes.map(({ exit }) => exit))
  }
}

const assemble = async (
  job: Job,
  listeners: Listeners,
  manifest: PieceManifest,
  log: string
): Promise<IngestResult> => {
  const { work, sound } = job
  const { peaks, tuning } = listeners
  const durationSec = peaks.frames() / sound.sampleRate
  if (Math.abs(manifest.totalFrames - durationSec * manifest.sampleRate) > 2) throw new Error('Pieces and sound differ')
  const loudness = readLoudness(log)
  if (loudness === undefined) throw new Error('No loudness was measured')
  const header = await peaks.finish()
  const tuned = tuning.result()
  const bytesOf = async (file: string) => (await stat(join(work, file))).size
  return {
    durationSec,
    sampleRate: sound.sampleRate,
    channels: sound.channels,
    loudness,
    tuningCents: tuned && Math.round(tuned.cents * 10) / 10,
    rendition: { file: renditionFile, mime: renditionMime, bytes: await bytesOf(renditionFile) },
    peaks: { file: peaksFile, bytes: await bytesOf(peaksFile), levels: header.levels },
    manifest
  }
}

const produce = async (options: IngestOptions, work: string): Promise<Result<IngestResult, MediaFault>> => {
  const { signal, limits, onProgress, source } = options
  const bounds = { ...defaultMediaLimits, ...limits }
  onProgress?.('probing', 0)
  await linkSource(work, source)
  const probed = await probeSource(work, source, { signal, limits })
  if (!probed.ok) return probed
  const probe = probed.value
  const sound: Sound = { sampleRate: probe.sampleRate, channels: probe.channels === 1 ? 1 : 2 }
  await mkdir(join(work, piecesFolder))
  const peaks = await createPeaksWriter(join(work, peaksFile), sound.sampleRate, sound.channels)
  try {
    return await encode({ ...options, work, sound, probe, bounds }, peaks)
  } finally {
    await peaks.close()
  }
}

/**
 * Ingests one recording. A fault of the recording comes back as such and leaves nothing; being stopped, a full disk
 * (`StorageFull`) and faults of the server are thrown and leave nothing either. May be killed at any moment and run
 * again: a finished result is found and given back, leftovers of dead runs are removed.
 */
export const ingestRecording = async (options: IngestOptions): Promise<Result<IngestResult, MediaFault>> => {
  const { outDir, signal, onProgress } = options
  signal?.throwIfAborted()
  await sweepOrphans(dirname(outDir))
  const finished = await readIngestResult(outDir)
  if (finished !== undefined) return ok(finished)
  const work = await makeWorkFolder(dirname(outDir))
  try {
    const made = await produce(options, work)
    if (!made.ok) return made
    await writeFile(join(work, resultFile), JSON.stringify(made.value))
    await rm(join(work, sourceName))
    signal?.throwIfAborted()
    const published = await publishFolder(work, outDir)
    onProgress?.('finishing', 1)
    const theirs = published === 'taken' ? await readIngestResult(outDir) : undefined
    if (published === 'taken' && theirs === undefined) throw new Error(`${basename(outDir)} is taken by something else`)
    return ok(theirs ?? made.value)
  } catch (error) {
    throw storageError(error)
  } finally {
    await removeFolder(work)
  }
}
