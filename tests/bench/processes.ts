// Starting programs for a figure, and what they cost.
import { fork, spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { readFileSync } from 'node:fs'
import { setPriority } from 'node:os'
import { fileURLToPath } from 'node:url'

export const root = fileURLToPath(new URL('../../', import.meta.url))

/** The kernel counts in hundredths (getconf CLK_TCK, 100 on every Linux of today). */
const ticksPerSec = 100

/** Seconds of processor that this process and those it has waited for took, from /proc/self/stat (proc(5)). */
export const cpuSec = (): { own: number; children: number } => {
  const fields = readFileSync('/proc/self/stat', 'utf8')
    .replace(/^.*\) /, '')
    .split(' ')
    .map(Number)
  const ticks = (at: number) => (fields[at] ?? 0) / ticksPerSec
  return { own: ticks(11) + ticks(12), children: ticks(13) + ticks(14) }
}

export interface Cost {
  sec: number
  cpuSec: number
}

/** As the server starts ffmpeg: behind the requests of people. Both sides of a figure must wait alike. */
const mediaPriority = 5

/** Runs ffmpeg to its end. */
export const runFfmpeg = async (args: string[]): Promise<Cost> => {
  const began = performance.now()
  const before = cpuSec().children
  const child = spawn('ffmpeg', ['-nostdin', '-hide_banner', '-loglevel', 'error', '-y', ...args], { stdio: 'ignore' })
  if (child.pid !== undefined) setPriority(child.pid, mediaPriority)
  const [code] = (await once(child, 'close')) as [number | null]
  if (code !== 0) throw new Error(`ffmpeg ${args.join(' ')} ended with ${code}`)
  return { sec: (performance.now() - began) / 1000, cpuSec: cpuSec().children - before }
}

export interface Running {
  child: ChildProcess
  /** Sends a question and waits for what comes back. */
  ask<T>(question: unknown): Promise<T>
  /** Processor time it has taken so far, ms. */
  cpuMs(): Promise<number>
  stop(): Promise<void>
}

const howMuchCpu = 'cpu'

/** A TypeScript file of this folder in a process of its own, which talks by messages and ends with us. */
export const start = (file: string, given: unknown): Running => {
  const child = fork(fileURLToPath(new URL(file, import.meta.url)), [JSON.stringify(given)], {
    cwd: root,
    execArgv: ['--import', 'tsx'],
    env: { ...process.env, NODE_ENV: 'production' },
    stdio: ['ignore', 'ignore', 'inherit', 'ipc']
  })
  const gone = once(child, 'exit')
  const answer = async (): Promise<unknown> => {
    const ended = gone.then(([code]) => Promise.reject(new Error(`${file} ended with ${String(code)}`)))
    const [message] = (await Promise.race([once(child, 'message'), ended])) as unknown[]
    return message
  }
  const ask = async <T>(question: unknown): Promise<T> => {
    const answered = answer()
    child.send(question as object)
    return (await answered) as T
  }
  return {
    child,
    ask,
    cpuMs: () => ask<number>(howMuchCpu),
    stop: async () => {
      if (child.connected) child.disconnect()
      await gone
    }
  }
}

/** For such a process: what it was given, and its answers. Ends when whoever started it is gone. */
export const serveQuestions = <Given, Question>(
  answer: (question: Question, given: Given) => unknown,
  end: () => Promise<void> = async () => undefined
): void => {
  const given = JSON.parse(process.argv[2] ?? '{}') as Given
  process.on('message', (question) => {
    const { user, system } = process.cpuUsage()
    const said = question === howMuchCpu ? (user + system) / 1000 : answer(question as Question, given)
    Promise.resolve(said).then(
      (reply) => process.send?.(reply ?? null),
      (error: unknown) => {
        process.stderr.write(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`)
        process.exit(1)
      }
    )
  })
  // A terminal's Ctrl-C goes to everybody; whoever started us decides.
  process.on('SIGINT', () => undefined)
  process.on('disconnect', () => {
    void end().finally(() => process.exit())
  })
}
