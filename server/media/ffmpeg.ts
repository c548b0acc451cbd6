// The only place that starts ffmpeg and ffprobe: closed lists of formats, protocols and codecs, limits, no network.
import { spawn, spawnSync, type ChildProcess } from 'node:child_process'
import { setPriority } from 'node:os'
import type { Readable, Writable } from 'node:stream'
import ffmpegCommand, { type FfmpegCommand } from 'fluent-ffmpeg'

export type ProcessLimits = { cpuSec: number; wallSec: number; memoryBytes: number; outputBytes: number }

export type ProcessOptions = { cwd: string; limits: ProcessLimits; signal?: AbortSignal | undefined; pipeIn?: boolean }

export type Exit = {
  outcome: 'done' | 'failed' | 'aborted' | 'too-slow' | 'too-large' | 'no-space'
  /** The last few kilobytes of what it said. For logs only. */
  stderr: string
}

export type MediaProcess = { stdin: Writable | null; stdout: Readable; exit: Promise<Exit>; stop: () => void }

// A text file called .mp3 can be a list that makes ffmpeg read other local files: only these demuxers may open anything.
const formats = 'wav,w64,mp3,flac,ogg,mov,mp4,m4a,matroska,webm,aac,aiff'
const pcm = ['s16', 's24', 's32', 'f32', 'f64'].flatMap((kind) => [`pcm_${kind}le`, `pcm_${kind}be`])
const codecs =
  `${pcm.join(',')},pcm_u8,pcm_s8,pcm_alaw,pcm_mulaw,adpcm_ms,adpcm_ima_wav,flac,alac,` +
  'mp3,mp3float,aac,opus,libopus,vorbis,libvorbis'

const closedLists = (formatList: string): string[] => [
  '-format_whitelist',
  formatList,
  '-protocol_whitelist',
  'file,pipe'
]

/** Name under which a recording stands in its work folder; a person's file name never reaches a command line. */
export const sourceName = 'source'
const sourceAddress = `file:${sourceName}`

const stderrKept = 4096

/** A command that reads the work folder's `source`. `inputOptions` stand before it. */
export const fromSource = (inputOptions: string[] = []): FfmpegCommand =>
  ffmpegCommand()
    .input(sourceAddress)
    .inputOptions([...closedLists(formats), '-codec_whitelist', codecs, ...inputOptions])

/** A command that reads raw samples from standard input: 32-bit floats, interleaved. */
export const fromSamples = (sampleRate: number, channels: number): FfmpegCommand =>
  ffmpegCommand()
    .input('pipe:0')
    .inputFormat('f32le')
    .inputOptions([
      ...closedLists('f32le'),
      '-codec_whitelist',
      'pcm_f32le',
      '-ar',
      String(sampleRate),
      '-ac',
      String(channels)
    ])

const works = (command: string[]): boolean =>
  spawnSync(command[0] ?? '', [...command.slice(1), 'true'], { stdio: 'ignore', timeout: 5000 }).status === 0

let tried: { prlimit: boolean; unshare: string[] } | undefined

/** What this machine allows, tried once: limits through prlimit, and a network namespace of its own (root, or mapped to root). */
export const mediaSandbox = (): { prlimit: boolean; unshare: string[] } =>
  (tried ??= {
    prlimit: works(['prlimit', '--core=0', '--']),
    unshare: [['unshare', '-n', '--'], ['unshare', '-rn', '--'], []].find((way) => way.length === 0 || works(way)) ?? []
  })

const wrapped = (limits: ProcessLimits): string[] => {
  const { prlimit, unshare } = mediaSandbox()
  const bounds = [
    `--cpu=${Math.ceil(limits.cpuSec)}`,
    `--as=${Math.ceil(limits.memoryBytes)}`,
    `--fsize=${Math.ceil(limits.outputBytes)}`,
    '--nofile=64',
    '--core=0',
    '--'
  ]
  return [...(prlimit ? ['prlimit', ...bounds] : []), ...unshare]
}

const outcomeOf = (code: number | null, signal: string | null, stderr: string): Exit['outcome'] => {
  if (code === 0) return 'done'
  if (/No space left on device|Disk quota exceeded/.test(stderr)) return 'no-space'
  // The file-size limit ends the process by signal or, where that is ignored, by a failed write.
  if (signal === 'SIGXFSZ' || /File too large/.test(stderr)) return 'too-large'
  return signal === 'SIGXCPU' || signal === 'SIGKILL' ? 'too-slow' : 'failed'
}

const watch = (child: ChildProcess, options: ProcessOptions): { exit: Promise<Exit>; stop: () => void } => {
  let stderr = ''
  let stopped: Exit['outcome'] | undefined
  const stop = (why: Exit['outcome']) => {
    stopped ??= why
    child.kill('SIGKILL')
  }
  const onAbort = () => stop('aborted')
  const timer = setTimeout(() => stop('too-slow'), options.limits.wallSec * 1000)
  options.signal?.addEventListener('abort', onAbort, { once: true })
  if (options.signal?.aborted) onAbort()
  child.stderr?.setEncoding('utf8').on('data', (text: string) => {
    stderr = (stderr + text).slice(-stderrKept)
  })
  // A process that ends early leaves a broken pipe behind; its exit says why.
  child.stdin?.on('error', () => undefined)
  const exit = new Promise<Exit>((resolve, reject) => {
    child.once('error', reject)
    child.once('close', (code, signal) => resolve({ outcome: stopped ?? outcomeOf(code, signal, stderr), stderr }))
  }).finally(() => {
    clearTimeout(timer)
    options.signal?.removeEventListener('abort', onAbort)
  })
  return { exit, stop: () => stop('aborted') }
}

const start = (program: 'ffmpeg' | 'ffprobe', args: string[], options: ProcessOptions): MediaProcess => {
  const [command = program, ...rest] = [...wrapped(options.limits), program, ...args]
  const child = spawn(command, rest, {
    cwd: options.cwd,
    stdio: [options.pipeIn ? 'pipe' : 'ignore', 'pipe', 'pipe'],
    // Nothing of the server's environment (secrets, proxies) is handed on.
    env: { PATH: process.env['PATH'], LC_ALL: 'C', HOME: options.cwd }
  })
  const { exit, stop } = watch(child, options)
  if (child.pid !== undefined) lowerPriority(child.pid)
  return { stdin: child.stdin, stdout: child.stdout as Readable, exit, stop }
}

// Requests of people who are listening come before work in the background.
const lowerPriority = (pid: number): void => {
  try {
    setPriority(pid, 5)
  } catch {
    // It has already ended.
  }
}

/** The arguments fluent-ffmpeg has put together; it is not let near the process, which needs limits it cannot set. */
const argumentsOf = (command: FfmpegCommand): string[] =>
  // oxlint-disable-next-line no-underscore-dangle -- the package offers no other way to build without running
  command._getArguments()

/** Starts ffmpeg with what `command` was built to do. Never throws for what ffmpeg says: see `exit`. */
export const startFfmpeg = (command: FfmpegCommand, options: ProcessOptions, loglevel = 'error'): MediaProcess =>
  start('ffmpeg', ['-nostdin', '-hide_banner', '-nostats', '-loglevel', loglevel, ...argumentsOf(command)], options)

/**
 * Starts ffprobe on the work folder's `source` with `args` saying what to show. Without the list of codecs: ffprobe would
 * give up on a cover picture, and could not say that a film is one.
 */
export const startFfprobe = (args: string[], options: ProcessOptions): MediaProcess =>
  start('ffprobe', ['-hide_banner', '-loglevel', 'warning', ...closedLists(formats), ...args, sourceAddress], options)
