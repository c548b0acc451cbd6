// `npm run --silent stretch -- IN OUT.wav --speed S --semitones N --cents C`: a recording slower or faster, higher or lower.
// IN is any recording that the desk takes (WAV, AIFF, FLAC, MP3, M4A, Ogg, Opus, WebM); more than two channels are mixed down
// to two. OUT is a WAV at IN's own rate. Says nothing when all went well; exit code 2 for bad arguments and for what is no
// recording.
import { stat } from 'node:fs/promises'
import { dirname, resolve } from 'node:path'
import { StorageFull } from '@server/media/faults'
import { stretchRecording, type Stretched } from '@server/media/stretch-recording'
import { pitchLimits } from '@shared/audio/listening'

const usage = 'Usage: npm run --silent stretch -- IN OUT.wav [--speed S] [--semitones N] [--cents C]'
const ranges = {
  speed: { from: 0.2, to: 1.5, otherwise: 1 },
  semitones: { from: pitchLimits.minSemitones, to: pitchLimits.maxSemitones, otherwise: 0 },
  cents: { from: -pitchLimits.cents, to: pitchLimits.cents, otherwise: 0 }
}
type Name = keyof typeof ranges

class Refused extends Error {}

const isName = (name: string): name is Name => Object.hasOwn(ranges, name)

const readNumber = (name: Name, text: string | undefined): number => {
  const { from, to } = ranges[name]
  const value = /^[+-]?(\d+\.?\d*|\.\d+)$/.test(text ?? '') ? Number(text) : NaN
  if (value >= from && value <= to) return value
  throw new Refused(`--${name} takes a number from ${from} to ${to}${text === undefined ? '' : `, not "${text}"`}.`)
}

const readArguments = (args: readonly string[]) => {
  const files: string[] = []
  const settings = {
    speed: ranges.speed.otherwise,
    semitones: ranges.semitones.otherwise,
    cents: ranges.cents.otherwise
  }
  for (let at = 0; at < args.length; at++) {
    const [, name = '', joined] = /^--([^=]*)(?:=(.*))?$/s.exec(args[at] ?? '') ?? []
    if (isName(name)) settings[name] = readNumber(name, joined ?? args[++at])
    else if (args[at]?.startsWith('--')) throw new Refused(`There is no option ${args[at]}. ${usage}`)
    else files.push(args[at] ?? '')
  }
  const [source, target, ...more] = files
  if (!source || !target || more.length > 0) throw new Refused(usage)
  // npm runs this in the project's folder and says where it was called.
  const here = process.env['INIT_CWD'] ?? process.cwd()
  return { source: resolve(here, source), target: resolve(here, target), ...settings }
}

const kindOf = async (path: string): Promise<'file' | 'folder' | 'other' | 'nothing'> => {
  const found = await stat(path).catch(() => null)
  return found ? (found.isFile() ? 'file' : found.isDirectory() ? 'folder' : 'other') : 'nothing'
}

const check = async (source: string, target: string): Promise<void> => {
  if ((await kindOf(source)) !== 'file') throw new Refused(`There is no file ${source}.`)
  if ((await kindOf(dirname(target))) !== 'folder') throw new Refused(`There is no folder ${dirname(target)}.`)
  const there = await kindOf(target)
  if (there !== 'nothing' && there !== 'file') throw new Refused(`${target} is no file that can be written over.`)
}

const wordsFor = ({ loweredDb, isLimited }: Stretched): string =>
  `The result was too loud: all of it was made ${loweredDb.toFixed(1)} dB quieter` +
  (isLimited ? ', and its loudest moments were limited.' : '.')

const main = async (signal: AbortSignal): Promise<number> => {
  const job = readArguments(process.argv.slice(2))
  await check(job.source, job.target)
  const made = await stretchRecording({ ...job, signal })
  if (!made.ok) throw new Refused(made.error.sentence)
  if (made.value.loweredDb > 0) say(wordsFor(made.value))
  return 0
}

const say = (line: string): void => void process.stderr.write(`${line.replaceAll(/\s+/g, ' ')}\n`)

const stop = new AbortController()
for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.once(name, () => stop.abort())
process.exitCode = await main(stop.signal).catch((error: unknown) => {
  if (error instanceof Refused) {
    say(error.message)
    return 2
  }
  if (stop.signal.aborted) say('Stopped.')
  else if (error instanceof StorageFull) say('There is no room left on the disk.')
  else say(`This did not work: ${error instanceof Error ? error.message : String(error)}`)
  return 1
})
