import { randomUUID } from 'node:crypto'
import { abilitiesOn } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { Tune } from '@shared/contracts/tunes'
import { problem } from '@shared/errors/problems'
import type { OperationFault } from '@shared/documents/document'
import { chartDocument } from '@shared/music/chart-document'
import { checkChart } from '@shared/music/validate-chart'
import type { ChartBody } from '@shared/music/types'
import type { Db } from '@server/db/knex'
import type { Actor, Asker } from '@server/http/handlers'
import type { AuditRepo } from '@server/repositories/audit.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { StoredTune, TunesRepo } from '@server/repositories/tunes.repo'
import type { DocumentPlace, DocumentService } from '@server/services/documents.service'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  tunes: TunesRepo
  documents: DocumentService
  events: EventsRepo
  audit: AuditRepo
}
type Held = ReadonlySet<Relation>

const unreadable = ({ message, path = [] }: OperationFault) =>
  problem('invalid', { detail: message, errors: [{ in: 'body', path: ['chart', ...path].join('.'), message }] })

export const createTuneService = ({ db, tunes, documents, events, audit }: Deps) => {
  const withAbilities = (tune: StoredTune, actor: Actor, held: Held): Tune => {
    const own = new Set(held)
    if (tune.createdBy?.id === actor.id) own.add('author')
    return { ...tune, abilities: abilitiesOn('tune', own) }
  }
  const get = async (actor: Actor, held: Held, tuneId: string): Promise<Tune> => {
    const tune = await tunes.find(tuneId)
    if (!tune) throw problem('not-found')
    return withAbilities(tune, actor, held)
  }
  const chartPlace = async (actor: Actor, tuneId: string): Promise<DocumentPlace> => {
    const tune = await tunes.find(tuneId)
    if (!tune) throw problem('not-found')
    return {
      groupId: tune.groupId,
      home: { tuneId },
      event: 'chart:edited',
      recheck: (trx) => stillAllowed(actor, 'tune:edit', { tuneId }, tune.groupId, trx)
    }
  }

  return {
    get,
    list: async (actor: Actor, held: Held, groupId: string): Promise<{ items: Tune[] }> => ({
      items: (await tunes.ofGroup(groupId)).map((tune) => withAbilities(tune, actor, held))
    }),
    create: async (
      actor: Actor,
      held: Held,
      groupId: string,
      input: { id: string; title: string; chart?: ChartBody | undefined }
    ): Promise<Tune> => {
      const chart = input.chart ? checkChart(input.chart) : null
      if (chart && !chart.ok) throw unreadable(chart.error)
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:add-tune', { groupId }, groupId, trx)
        const before = await tunes.find(input.id, trx)
        if (before) {
          // Sent again after a lost answer.
          if (before.groupId !== groupId || before.createdBy?.id !== actor.id) throw problem('already-there')
          return
        }
        await tunes.insert({ id: input.id, groupId, title: input.title, createdBy: actor.id }, trx)
        await events.add({ groupId, type: 'tune:created', objectId: input.id, actorId: actor.id }, trx)
        if (input.chart) {
          const place = { groupId, home: { tuneId: input.id }, event: 'chart:edited' as const }
          await documents.editIn(
            chartDocument,
            place,
            actor,
            { id: randomUUID(), baseRevision: 0, operations: [{ kind: 'replaceChart', body: input.chart }] },
            trx
          )
        }
      })
      return get(actor, held, input.id)
    },
    rename: async (actor: Actor, held: Held, tuneId: string, title: string): Promise<Tune> => {
      const tune = await tunes.find(tuneId)
      if (!tune) throw problem('not-found')
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'tune:edit', { tuneId }, tune.groupId, trx)
        await tunes.rename(tuneId, title, trx)
        await events.add({ groupId: tune.groupId, type: 'tune:updated', objectId: tuneId, actorId: actor.id }, trx)
      })
      return get(actor, held, tuneId)
    },
    remove: async (actor: Actor, tuneId: string, asker: Asker): Promise<void> => {
      const tune = await tunes.find(tuneId)
      if (!tune) throw problem('not-found')
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'tune:delete', { tuneId }, tune.groupId, trx)
        await tunes.remove(tuneId, trx)
        await events.add({ groupId: tune.groupId, type: 'tune:removed', objectId: tuneId, actorId: actor.id }, trx)
        await audit.add(
          {
            what: 'tune-deleted',
            actorId: actor.id,
            objectId: tuneId,
            groupId: tune.groupId,
            address: asker.address,
            requestId: asker.requestId
          },
          trx
        )
      })
    },
    chartPlace
  }
}
export type TuneService = ReturnType<typeof createTuneService>
