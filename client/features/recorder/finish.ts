import { recordingRoutes } from '@shared/contracts/takes'
import type { Take, Reach } from '@shared/contracts/takes'
import { useRouteMutation } from '@client/lib/query'
import { createPieceSender, type PieceSender } from './piece-sender'
import { type Begun, browserPieceStore } from './piece-store'

/** What is said when a recording is kept. */
export interface KeepWords {
  title: string
  tuneId?: string
  reach: Reach
}

/** Makes a take of a recording whose pieces are on their way. */
export const useFinish = () => {
  const finish = useRouteMutation(recordingRoutes.finish)
  return async (id: string, pieces: number, sender: PieceSender, words: KeepWords): Promise<Take> => {
    await sender.drained()
    return finish.mutateAsync({ params: { recordingId: id }, body: { id, ...words, agreed: 'yes', pieces } })
  }
}

/** Keeps a recording that another page had begun: sends what is missing, then makes a take of it. */
export const useFinishLater = () => {
  const finish = useFinish()
  return async (begun: Begun & { groupId: string }, words: KeepWords): Promise<Take> => {
    const sender = createPieceSender({ begun, store: browserPieceStore })
    try {
      const take = await finish(begun.id, begun.pieces, sender, words)
      await browserPieceStore.remove(begun.id)
      return take
    } finally {
      sender.dispose()
    }
  }
}

/** Throws a recording away, here and on the server. */
export const useThrowAway = () => {
  const drop = useRouteMutation(recordingRoutes.drop)
  return async ({ id, groupId }: Pick<Begun, 'id' | 'groupId'>): Promise<void> => {
    await browserPieceStore.remove(id)
    // What the server never heard of is gone already.
    if (groupId) await drop.mutateAsync({ params: { recordingId: id } }).catch(() => undefined)
  }
}

/** All pieces of a recording that never left this browser; null when one is missing. */
export const fileOfPieces = async ({ id, pieces, mime }: Begun): Promise<File | null> => {
  const found = await Promise.all(Array.from({ length: pieces }, (_, index) => browserPieceStore.piece(id, index)))
  const whole = found.filter((piece) => piece !== null)
  if (whole.length !== pieces) return null
  return new File(whole, `Recording${mime.includes('mp4') ? '.m4a' : '.webm'}`, { type: mime.split(';')[0] ?? mime })
}
