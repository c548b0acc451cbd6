// A take that was played over another one comes with that one's bars, at its own seconds, in the transaction that makes it.
import { randomUUID } from 'node:crypto'
import { denial } from '@shared/access/permissions'
import { PlayedOver } from '@shared/contracts/takes'
import { problem } from '@shared/errors/problems'
import { overBarMap } from '@shared/practice/over-bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { createRelations } from '@server/access/relations'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import { createAccessRepo } from '@server/repositories/access.repo'
import type { DocumentsRepo } from '@server/repositories/documents.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'
import type { DocumentService } from '@server/services/documents.service'

interface Deps {
  takes: Pick<TakesRepo, 'home'>
  documents: Pick<DocumentsRepo, 'find'>
  edits: Pick<DocumentService, 'editIn'>
}

const noSuchTake = () =>
  problem('invalid', { errors: [{ in: 'body', path: 'over', message: 'There is no such take in this group.' }] })

/** From the text that a multipart field is. */
export const readPlayedOver = (text: string | undefined): PlayedOver | undefined => {
  if (text === undefined) return undefined
  try {
    return PlayedOver.parse(JSON.parse(text))
  } catch {
    throw problem('invalid', {
      errors: [{ in: 'body', path: 'over', message: 'It does not say where it lies along the other take.' }]
    })
  }
}

export const createPlayedOverService = ({ takes, documents, edits }: Deps) => ({
  /** Says the same of a take that is not there, in another group or not for these ears. */
  check: async (actor: Actor, over: PlayedOver, groupId: string, trx: Db): Promise<void> => {
    const home = await takes.home(over.takeId, trx)
    const held = await createRelations(createAccessRepo(trx)).of(actor, 'take:hear', { takeId: over.takeId })
    if (home?.groupId !== groupId || denial('take:hear', held)) throw noSuchTake()
  },

  /** Does nothing where the other take has no bars. */
  layBars: async (
    actor: Actor,
    take: { id: string; groupId: string; durationSec: number },
    { takeId, placeSec, rate }: PlayedOver,
    trx: Db
  ): Promise<void> => {
    const source = await documents.find(barMapDocument.name, { takeId })
    const known = source && barMapDocument.body.safeParse(source.body)
    const { durationSec } = take
    const body = known?.success ? overBarMap(known.data, { placeSec, rate, durationSec }, randomUUID) : null
    if (!body) return
    const place = { groupId: take.groupId, home: { takeId: take.id }, event: 'bar-map:edited' as const }
    const edit = { id: randomUUID(), baseRevision: 0, operations: [{ kind: 'setAll' as const, body }] }
    await edits.editIn(barMapDocument, place, actor, edit, trx)
  }
})
export type PlayedOverService = ReturnType<typeof createPlayedOverService>
