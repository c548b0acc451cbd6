// The pieces of a long take that are held around the playhead: fetched in the order of need, handed to the worklet, let go.
import type { Page } from '@shared/audio/playback/page-store'
import { wantedPieces } from '@shared/audio/playback/wanted-pieces'
import { createScope, type Scope } from '@client/lib/scope'
import { retryDelaysMs } from '../media-faults'
import { PieceFault } from './piece-fault'

export interface WindowManifest {
  sampleRate: number
  channels: number
  totalFrames: number
  pieces: readonly { firstSample: number; frames: number; decodedFrames: number; bytes: number }[]
}

export interface PieceWindowDeps {
  manifest: WindowManifest
  load(index: number, signal: AbortSignal): Promise<Page>
  put(index: number, page: Page): void
  drop(index: number): void
  /** True while pieces cannot be fetched. */
  onTrouble(isTrouble: boolean): void
  onFault(message: string): void
}

/** Played on without a line for this long; and so much for a step back. */
const aheadSec = 100
const behindSec = 12
/** While nobody listens less will do: enough to start at once. */
const idleAheadSec = 25
/** The stretcher looks ahead and back this far (Stretcher.reach), and a little more. */
export const marginSec = 3
/** Decoded and encoded sound held, and being worked on, stays well below 200 MB. */
const mostBytes = 150e6
const fetchesAtOnce = 2
/** Room for pieces that are not needed now. */
const roomyPieces = 24

export interface PieceWindow {
  /** Where it plays (or would), in frames, and what loop it is in. */
  look(placeFrame: number, loop: { startFrame: number; endFrame: number } | null, isPlaying: boolean): void
  /** The worklet has lost everything: send it all again. */
  forget(): void
  readonly heldPieces: readonly number[]
  /** Bytes decoded and encoded that are held or being worked on. */
  readonly heldBytes: number
  dispose(): void
}

export const createPieceWindow = (deps: PieceWindowDeps): PieceWindow => {
  const { manifest } = deps
  const { sampleRate, channels, pieces } = manifest
  const scope = createScope()
  const held = new Set<number>()
  const fetching = new Map<number, Scope>()
  let wanted: number[] = []
  let failures = 0
  let cancelRetry = (): void => undefined
  let isWaiting = false
  let isTroubled = false
  let isOver = false

  const decodedBytes = (index: number): number => (pieces[index]?.frames ?? 0) * channels * 4
  const longest = pieces.reduce((most, piece) => Math.max(most, piece.decodedFrames), 1) * channels * 4
  const most = Math.max(4, Math.floor(mostBytes / longest))

  const retryLater = (): void => {
    isWaiting = true
    const delay = retryDelaysMs[Math.min(failures, retryDelaysMs.length - 1)] ?? 1000
    failures += 1
    isTroubled = true
    deps.onTrouble(true)
    cancelRetry()
    cancelRetry = scope.timeout(tryNow, delay)
  }
  const tryNow = (): void => {
    cancelRetry()
    isWaiting = false
    fetchNext()
  }
  scope.listen(window, 'online', () => {
    if (!isWaiting) return
    failures = 0
    tryNow()
  })

  const fetchOne = async (index: number): Promise<void> => {
    const work = scope.child()
    fetching.set(index, work)
    try {
      const page = await deps.load(index, work.signal)
      if (work.disposed) return
      held.add(index)
      deps.put(index, page)
      if (isTroubled) deps.onTrouble(false)
      isTroubled = false
      failures = 0
    } catch (error) {
      if (work.disposed) return
      if (error instanceof PieceFault && !error.canRetry) {
        isOver = true
        deps.onFault(error.message)
      } else retryLater()
    } finally {
      if (fetching.get(index) === work) fetching.delete(index)
      work.dispose()
      fetchNext()
    }
  }
  const fetchNext = (): void => {
    // Until the piece under the playhead is here it has the line for itself.
    const [first] = wanted
    const atOnce = first !== undefined && !held.has(first) ? 1 : fetchesAtOnce
    for (const index of wanted) {
      if (isOver || isWaiting || scope.disposed || fetching.size >= atOnce) return
      if (!held.has(index) && !fetching.has(index)) void fetchOne(index)
    }
  }
  const letGo = (): void => {
    const keep = new Set(wanted)
    for (const [index, work] of fetching) {
      if (keep.has(index)) continue
      fetching.delete(index)
      work.dispose()
    }
    for (const index of held) {
      if (keep.has(index)) continue
      held.delete(index)
      deps.drop(index)
    }
  }

  return {
    look: (placeFrame, loop, isPlaying) => {
      const next = wantedPieces(manifest, {
        placeFrame,
        loop,
        aheadFrames: (isPlaying ? aheadSec : idleAheadSec) * sampleRate,
        behindFrames: behindSec * sampleRate,
        marginFrames: marginSec * sampleRate,
        most
      })
      // What was here for another place is kept while there is room, for the way back.
      const spare = wanted.filter((index) => held.has(index) && !next.includes(index))
      wanted = [...next, ...spare].slice(0, Math.max(next.length, Math.min(most, roomyPieces)))
      letGo()
      fetchNext()
    },
    forget: () => {
      held.clear()
      fetchNext()
    },
    get heldPieces() {
      return [...held].sort((one, two) => one - two)
    },
    get heldBytes() {
      const decoded = [...held].reduce((sum, index) => sum + decodedBytes(index), 0)
      // A piece on its way is there encoded, decoded with its pre-roll, and as the copy that is handed over.
      const working = [...fetching.keys()].reduce(
        (sum, index) =>
          sum + (pieces[index]?.bytes ?? 0) + (pieces[index]?.decodedFrames ?? 0) * channels * 4 + decodedBytes(index),
        0
      )
      return decoded + working
    },
    dispose: () => scope.dispose()
  }
}
