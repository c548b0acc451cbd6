// Asks ffprobe what a file is. Only its answer is believed, never the file's name or declared type.
import { stat } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { createInterface } from 'node:readline'
import { z } from 'zod'
import { err, ok, type Result } from '@shared/result.ts'
import { mediaFault, StorageFull, type MediaFault, type MediaFaultCode } from './faults.ts'
import { startFfprobe, type Exit, type ProcessOptions } from './ffmpeg.ts'
import { faultOfHead, readHead, wavIsCutOff } from './file-head.ts'
import { defaultMediaLimits, type MediaLimits } from './limits.ts'
import { linkSource, makeWorkFolder, removeFolder } from './work-folder.ts'

export type Probe = {
  container: 'wav' | 'mp3' | 'flac' | 'ogg' | 'mp4' | 'webm' | 'aac' | 'aiff'
  codec: string
  sampleRate: number
  channels: number
  durationSec: number
  /** Whether the length is the file's own statement, or was counted packet by packet. */
  durationFrom: 'header' | 'packets'
  bitRate?: number
  /** Bits that hold what the file holds: 24 for recordings without loss that are wider than 16, else 16. */
  depth: 16 | 24
}

export type ProbeOptions = { signal?: AbortSignal | undefined; limits?: Partial<MediaLimits> | undefined }

const containers: Record<string, Probe['container']> = {
  wav: 'wav',
  w64: 'wav',
  mp3: 'mp3',
  flac: 'flac',
  ogg: 'ogg',
  'mov,mp4,m4a,3gp,3g2,mj2': 'mp4',
  'matroska,webm': 'webm',
  aac: 'aac',
  aiff: 'aiff'
}

// A demuxer that guessed from next to nothing (text and archives pass for mp3 with a score of 1) is not believed.
const lowestScore = 10

const Answer = z.object({
  format: z.object({
    format_name: z.string(),
    probe_score: z.number(),
    duration: z.coerce.number().optional(),
    bit_rate: z.coerce.number().optional()
  }),
  streams: z.array(
    z.object({
      codec_type: z.string().optional(),
      codec_name: z.string().optional(),
      sample_fmt: z.string().optional(),
      sample_rate: z.coerce.number().optional(),
      channels: z.number().optional(),
      duration: z.coerce.number().optional(),
      disposition: z.object({ attached_pic: z.number().optional() }).optional()
    })
  )
})
type Answer = z.infer<typeof Answer>

const shown = [
  'format=format_name,duration,probe_score,bit_rate',
  'stream=codec_type,codec_name,sample_fmt,sample_rate,channels,duration',
  'stream_disposition=attached_pic'
].join(':')

// Names, titles and other tags are not asked for, so an honest answer is short.
const longestAnswer = 1 << 20

const probeLimits = (memoryBytes: number): ProcessOptions['limits'] => ({
  cpuSec: 60,
  wallSec: 120,
  memoryBytes,
  outputBytes: 1 << 20
})

/** What must not be blamed on the file is thrown. */
export const throwIfOurs = (exit: Exit, signal: AbortSignal | undefined): void => {
  signal?.throwIfAborted()
  if (exit.outcome === 'no-space') throw new StorageFull()
}

const ask = async (options: ProcessOptions): Promise<{ exit: Exit; answer: Answer | undefined }> => {
  const probe = startFfprobe(['-show_entries', shown, '-of', 'json'], options)
  let text = ''
  for await (const chunk of probe.stdout) {
    if (text.length < longestAnswer) text += String(chunk)
  }
  const exit = await probe.exit
  throwIfOurs(exit, options.signal)
  return { exit, answer: exit.outcome === 'done' ? parseAnswer(text) : undefined }
}

const parseAnswer = (text: string): Answer | undefined => {
  try {
    return Answer.safeParse(JSON.parse(text)).data
  } catch {
    return undefined
  }
}

/** Reads every packet of the first audio stream: for files whose header does not tell how long they are. */
const countDuration = async (options: ProcessOptions, maxSec: number): Promise<number> => {
  const show = ['-select_streams', 'a:0', '-show_entries', 'packet=pts_time,duration_time', '-of', 'csv=p=0']
  const probe = startFfprobe(show, options)
  let first: number | undefined
  let end = 0
  for await (const line of createInterface({ input: probe.stdout })) {
    const [pts, duration] = line.split(',').map(Number.parseFloat)
    if (pts === undefined || !Number.isFinite(pts)) continue
    first ??= Math.max(0, pts)
    end = Math.max(end, pts + (duration !== undefined && Number.isFinite(duration) ? duration : 0))
    if (end - first > maxSec + 1) {
      probe.stop()
      break
    }
  }
  throwIfOurs(await probe.exit, options.signal)
  return Math.max(0, end - (first ?? 0))
}

type Sound = Omit<Probe, 'durationSec' | 'durationFrom'> & { headerSec: number }

const soundOf = (answer: Answer): Result<Sound, MediaFaultCode> => {
  const container = containers[answer.format.format_name]
  if (container === undefined || answer.format.probe_score < lowestScore) return err('not-audio')
  const pictures = answer.streams.filter((stream) => stream.codec_type === 'video')
  if (pictures.some((stream) => stream.disposition?.attached_pic !== 1)) return err('video')
  const stream = answer.streams.find((one) => one.codec_type === 'audio')
  if (stream === undefined) return err('not-audio')
  const { codec_name: codec, sample_rate: sampleRate = 0, channels = 0 } = stream
  if (codec === undefined || codec === 'unknown') return err('unsupported')
  if (sampleRate < 1 || channels < 1) return err('not-audio')
  const bitRate = answer.format.bit_rate
  const headerSec = answer.format.duration ?? stream.duration ?? 0
  const depth = isLossless(codec) && !/^(u8|s16)p?$/.test(stream.sample_fmt ?? '') ? 24 : 16
  return ok({ container, codec, sampleRate, channels, depth, headerSec, ...(bitRate === undefined ? {} : { bitRate }) })
}

const isLossless = (codec: string): boolean => /^(pcm_[suf]\d+(le|be)?|flac|alac)$/.test(codec)

/** Codecs that ffprobe may name; what our own ffmpeg is allowed to decode is a closed list beside it. */
const isReadable = (codec: string): boolean =>
  /^(pcm_(s8|u8|[su](16|24|32)|f32|f64)(le|be)?|pcm_(alaw|mulaw)|adpcm_(ms|ima_wav)|flac|alac|mp3|aac|opus|vorbis)$/.test(
    codec
  )

/** Probes a work folder's `source`. */
export const probeSource = async (
  folder: string,
  path: string,
  { signal, limits }: ProbeOptions
): Promise<Result<Probe, MediaFault>> => {
  const bounds = { ...defaultMediaLimits, ...limits }
  const options: ProcessOptions = { cwd: folder, limits: probeLimits(bounds.memoryBytes), signal }
  const head = await readHead(path)
  if (head.length === 0) return err(mediaFault('empty'))
  const { exit, answer } = await ask(options)
  if (exit.outcome === 'too-slow') return err(mediaFault('too-heavy'))
  if (answer === undefined) return err(mediaFault(faultOfHead(head)))
  const sound = soundOf(answer)
  if (!sound.ok) return err(mediaFault(sound.error === 'not-audio' ? blame(head, answer) : sound.error))
  const { headerSec, ...found } = sound.value
  if (!isReadable(found.codec)) return err(mediaFault('unsupported'))
  if (found.container === 'wav' && wavIsCutOff(head, (await stat(path)).size)) return err(mediaFault('truncated'))
  const trusted = headerSec > 0 && !(exit.stderr.includes('Estimating duration') && found.container !== 'wav')
  const durationSec = trusted ? headerSec : await countDuration(options, bounds.maxDurationSec)
  if (durationSec > bounds.maxDurationSec) return err(mediaFault('too-long'))
  if (durationSec < bounds.minDurationSec) return err(mediaFault('empty'))
  return ok({ ...found, durationSec, durationFrom: trusted ? 'header' : 'packets' })
}

/** A container without sound in it is told apart from a file that is no container at all. */
const blame = (head: Buffer, answer: Answer): MediaFaultCode => {
  const code = faultOfHead(head)
  return code === 'truncated' && answer.format.probe_score >= lowestScore ? 'empty' : code
}

/** What the recording at `path` is, or why it is none. Leaves nothing behind. */
export const probeRecording = async (path: string, options: ProbeOptions = {}): Promise<Result<Probe, MediaFault>> => {
  const folder = await makeWorkFolder(tmpdir())
  try {
    await linkSource(folder, path)
    return await probeSource(folder, path, options)
  } finally {
    await removeFolder(folder)
  }
}
