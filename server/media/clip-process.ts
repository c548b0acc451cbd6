// The process in which one clip is made: rendering never gives way for long, and the worker's other lanes must go on.
import { StorageFull, type MediaFault } from './faults.ts'
import { makeClip, type ClipOrder, type ClipStage } from './make-clip.ts'

/** What it says to the one who started it. */
export type ClipWord =
  | { kind: 'progress'; stage: ClipStage; fraction: number }
  | { kind: 'made'; bytes: number }
  | { kind: 'fault'; fault: MediaFault }
  | { kind: 'broken'; isFull: boolean; message: string }

/** Told at most this often, ms. */
const tellEveryMs = 200

const stop = new AbortController()
// Whoever started it is gone: nobody waits for the clip.
process.once('disconnect', () => stop.abort())
// The group's Ctrl-C is for the worker, which says what is to happen.
process.on('SIGINT', () => undefined)
process.once('SIGTERM', () => stop.abort())

const say = (word: ClipWord): Promise<void> =>
  new Promise((done) => {
    if (process.connected) process.send?.(word, undefined, {}, () => done())
    else done()
  })

const work = async (order: ClipOrder): Promise<ClipWord> => {
  let told = 0
  let stage: ClipStage | null = null
  const onProgress = (now: ClipStage, fraction: number): void => {
    if (now === stage && Date.now() - told < tellEveryMs) return
    stage = now
    told = Date.now()
    void say({ kind: 'progress', stage: now, fraction })
  }
  try {
    const made = await makeClip(order, { signal: stop.signal, onProgress })
    return made.ok ? { kind: 'made', ...made.value } : { kind: 'fault', fault: made.error }
  } catch (error) {
    const message = error instanceof Error ? (error.stack ?? error.message) : String(error)
    return { kind: 'broken', isFull: error instanceof StorageFull, message }
  }
}

process.once('message', (order) => {
  void work(order as ClipOrder)
    .then(say)
    .finally(() => process.disconnect?.())
})
