// Starts the process that makes a clip, listens to it, and ends it when it is not wanted any more.
import { fork } from 'node:child_process'
import { setPriority } from 'node:os'
import { fileURLToPath } from 'node:url'
import { err, ok, type Result } from '@shared/result.ts'
import type { ClipWord } from './clip-process.ts'
import { StorageFull, type MediaFault } from './faults.ts'
import type { ClipOrder, ClipStage } from './make-clip.ts'

export type ClipRun = { signal: AbortSignal; onProgress: (stage: ClipStage, fraction: number) => void }

const script = fileURLToPath(new URL('./clip-process.ts', import.meta.url))
/** After being asked to stop it has so long to tidy up. */
const patienceMs = 4000

/** Makes a clip in a process of its own. Faults as in `makeClip`; throws the signal's reason when stopped. */
export const runClip = async (
  order: ClipOrder,
  { signal, onProgress }: ClipRun
): Promise<Result<{ bytes: number }, MediaFault>> => {
  signal.throwIfAborted()
  const child = fork(script, {
    execArgv: ['--import', 'tsx'],
    stdio: ['ignore', 'ignore', 'ignore', 'ipc'],
    // Nothing of the server's secrets is handed on.
    env: { PATH: process.env['PATH'] }
  })
  let last: ClipWord | null = null
  let timer: NodeJS.Timeout | undefined
  const stop = (): void => {
    child.kill('SIGTERM')
    timer ??= setTimeout(() => child.kill('SIGKILL'), patienceMs)
  }
  signal.addEventListener('abort', stop, { once: true })
  child.on('message', (said) => {
    const word = said as ClipWord
    if (word.kind === 'progress') onProgress(word.stage, word.fraction)
    else last = word
  })
  try {
    // People who listen come before work in the background.
    if (child.pid !== undefined) setPriority(child.pid, 5)
    await new Promise<void>((ended, failed) => {
      child.once('error', failed)
      child.once('exit', () => ended())
      child.send(order, (error) => error && stop())
    })
  } finally {
    clearTimeout(timer)
    signal.removeEventListener('abort', stop)
    child.kill('SIGKILL')
  }
  return answerOf(last, signal)
}

const answerOf = (word: ClipWord | null, signal: AbortSignal): Result<{ bytes: number }, MediaFault> => {
  if (word?.kind === 'made') return ok({ bytes: word.bytes })
  if (word?.kind === 'fault') return err(word.fault)
  signal.throwIfAborted()
  if (word?.kind === 'broken' && word.isFull) throw new StorageFull()
  throw new Error(`A clip was not made: ${word?.kind === 'broken' ? word.message : 'its process died'}`)
}
