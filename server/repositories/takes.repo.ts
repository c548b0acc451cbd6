import type { Person } from '@shared/contracts/common'
import type { Reach, Take } from '@shared/contracts/takes'
import type { Db } from '@server/db/knex'
import type { TakeRow } from '@server/db/tables'
import { person } from '@server/repositories/people'

export type StoredTake = Omit<Take, 'abilities'>
export interface TakeHome {
  groupId: string
  uploaderId: string
  durationSec: number | null
}
export interface TakeMedia {
  groupId: string
  title: string
  state: Take['state']
  originalMime: string | null
  renditionMime: string | null
}
export interface IngestedTake {
  durationSec: number
  sampleRate: number
  channels: number
  loudnessLufs: number | null
  truePeakDb: number | null
  gainDb: number
  tuningCents: number | null
  renditionMime: string
  manifest: object
}
export interface TakeCursor {
  createdAt: string
  id: string
}

type Joined = TakeRow & { uploader_name: string; comment_count: number; open_count: number }

export const createTakesRepo = (db: Db) => {
  const joined = (trx: Db) =>
    trx('takes')
      .join('users', 'users.id', 'takes.uploader_id')
      .select<Joined[]>(
        'takes.id',
        'takes.group_id',
        'takes.tune_id',
        'takes.uploader_id',
        'takes.over_take_id',
        'takes.title',
        'takes.reach',
        'takes.state',
        'takes.stage',
        'takes.progress',
        'takes.fault',
        'takes.duration_sec',
        'takes.sample_rate',
        'takes.channels',
        'takes.loudness_lufs',
        'takes.gain_db',
        'takes.tuning_cents',
        'takes.created_at',
        'users.name as uploader_name',
        trx.raw('(select count(*) from comments c where c.take_id = takes.id) as comment_count'),
        trx.raw(
          "(select count(*) from comments c where c.take_id = takes.id and c.settled_at is null and c.kind in ('question', 'to fix')) as open_count"
        )
      )
  const toTake = (row: Joined, named: Person[]): StoredTake => ({
    id: row.id,
    groupId: row.group_id,
    tuneId: row.tune_id,
    overTakeId: row.over_take_id,
    title: row.title,
    uploader: person(row.uploader_id, row.uploader_name),
    reach: row.reach,
    named,
    createdAt: row.created_at.toISOString(),
    state: row.state,
    stage: row.stage,
    progress: row.progress,
    fault: row.fault,
    durationSec: row.duration_sec,
    sampleRate: row.sample_rate,
    channels: row.channels,
    loudnessLufs: row.loudness_lufs,
    gainDb: row.gain_db,
    tuningCents: row.tuning_cents,
    commentCount: row.comment_count,
    openCount: row.open_count
  })
  const namedOn = async (takeIds: string[], trx: Db): Promise<Map<string, Person[]>> => {
    const rows = await trx('take_names')
      .join('users', 'users.id', 'take_names.user_id')
      .whereIn('take_names.take_id', takeIds)
      .orderBy('users.name')
      .select('take_names.take_id', 'users.id', 'users.name')
    const named = new Map<string, Person[]>()
    for (const row of rows) named.set(row.take_id, [...(named.get(row.take_id) ?? []), person(row.id, row.name)])
    return named
  }
  const all = async (rows: Joined[], trx: Db): Promise<StoredTake[]> => {
    const named = await namedOn(
      rows.map((row) => row.id),
      trx
    )
    return rows.map((row) => toTake(row, named.get(row.id) ?? []))
  }

  return {
    find: async (id: string, trx: Db = db): Promise<StoredTake | null> => {
      const [take] = await all(await joined(trx).where('takes.id', id), trx)
      return take ?? null
    },
    home: async (id: string, trx: Db = db): Promise<TakeHome | null> => {
      const row = await trx('takes').where({ id }).first('group_id', 'uploader_id', 'duration_sec')
      return row ? { groupId: row.group_id, uploaderId: row.uploader_id, durationSec: row.duration_sec } : null
    },
    media: async (id: string): Promise<TakeMedia | null> => {
      const row = await db('takes').where({ id }).first('group_id', 'title', 'state', 'original_mime', 'rendition_mime')
      return row
        ? {
            groupId: row.group_id,
            title: row.title,
            state: row.state,
            originalMime: row.original_mime,
            renditionMime: row.rendition_mime
          }
        : null
    },
    /** The manifest of the pieces: an hour's is some 46 kB, so that only who asks for pieces reads it. */
    manifest: async (id: string): Promise<unknown> =>
      (await db('takes').where({ id, state: 'ready' }).first('manifest'))?.manifest ?? null,
    /** Newest first, one page and a row more; only takes whose reach lets this person hear them, decided in the query. */
    audible: async (
      userId: string,
      groupId: string,
      filter: { tuneId?: string | undefined; after: TakeCursor | null; limit: number }
    ): Promise<StoredTake[]> => {
      const query = joined(db)
        .join('memberships as me', (on) => on.on('me.group_id', 'takes.group_id').andOnVal('me.user_id', userId))
        .where('takes.group_id', groupId)
        .andWhere((q) =>
          q
            .where('takes.uploader_id', userId)
            .orWhere((o) => o.whereNot('takes.state', 'failed').andWhereRaw(audibleSql, { user: userId }))
        )
        .orderBy([
          { column: 'takes.created_at', order: 'desc' },
          { column: 'takes.id', order: 'desc' }
        ])
        .limit(filter.limit)
      if (filter.tuneId) query.andWhere('takes.tune_id', filter.tuneId)
      if (filter.after)
        query.andWhereRaw('(takes.created_at, takes.id) < (?::timestamptz, ?::uuid)', [
          filter.after.createdAt,
          filter.after.id
        ])
      return all(await query, db)
    },
    ofGroup: async (
      groupId: string
    ): Promise<Pick<StoredTake, 'id' | 'title' | 'uploader' | 'durationSec' | 'createdAt'>[]> => {
      const rows = await joined(db).where('takes.group_id', groupId).orderBy('takes.created_at', 'desc').limit(500)
      return rows.map((row) => toTake(row, []))
    },
    usage: async (userId: string, groupId: string, trx: Db): Promise<{ takes: number; bytes: number }> => {
      const [row] = await trx('takes')
        .where({ uploader_id: userId, group_id: groupId })
        .select<{ takes: number; bytes: string | null }[]>(
          trx.raw('count(*) as takes'),
          trx.raw('sum(original_bytes) as bytes')
        )
      return { takes: row?.takes ?? 0, bytes: Number(row?.bytes ?? 0) }
    },
    insert: async (
      row: {
        id: string
        groupId: string
        tuneId: string | null
        uploaderId: string
        overTakeId: string | null
        title: string
        reach: Reach
        bytes: number
        mime: string
      },
      trx: Db
    ): Promise<void> => {
      await trx('takes').insert({
        id: row.id,
        group_id: row.groupId,
        tune_id: row.tuneId,
        uploader_id: row.uploaderId,
        over_take_id: row.overTakeId,
        title: row.title,
        reach: row.reach,
        agreed_at: trx.fn.now(),
        original_bytes: row.bytes,
        original_mime: row.mime
      })
    },
    update: async (
      id: string,
      change: { title?: string | undefined; tuneId?: string | null | undefined; reach?: Reach | undefined },
      trx: Db
    ): Promise<void> => {
      await trx('takes')
        .where({ id })
        .update({
          ...(change.title === undefined ? {} : { title: change.title }),
          ...(change.tuneId === undefined ? {} : { tune_id: change.tuneId }),
          ...(change.reach === undefined ? {} : { reach: change.reach }),
          updated_at: trx.fn.now()
        })
    },
    setNames: async (id: string, userIds: string[], trx: Db): Promise<void> => {
      await trx('take_names').where({ take_id: id }).delete()
      if (userIds.length > 0)
        await trx('take_names').insert([...new Set(userIds)].map((userId) => ({ take_id: id, user_id: userId })))
    },
    remove: async (id: string, trx: Db): Promise<void> => {
      await trx('takes').where({ id }).delete()
    },
    ids: async (candidates: string[]): Promise<Set<string>> => {
      const rows = await db('takes').whereIn('id', candidates).select('id')
      return new Set(rows.map((row) => row.id))
    },
    /** False when the take has gone meanwhile. */
    setWorking: async (id: string, stage: string, progress: number, trx: Db = db): Promise<boolean> =>
      (await trx('takes')
        .where({ id })
        .whereNot({ state: 'ready' })
        .update({ state: 'working', stage, progress, fault: null })) > 0,
    setWaiting: async (id: string, trx: Db): Promise<void> => {
      await trx('takes').where({ id }).update({ state: 'waiting', stage: null, progress: 0, fault: null })
    },
    setFailed: async (id: string, fault: string, trx: Db): Promise<void> => {
      await trx('takes').where({ id }).update({ state: 'failed', stage: null, progress: 0, fault })
    },
    setReady: async (id: string, result: IngestedTake, trx: Db): Promise<boolean> =>
      (await trx('takes')
        .where({ id })
        .update({
          state: 'ready',
          stage: null,
          progress: 1,
          fault: null,
          duration_sec: result.durationSec,
          sample_rate: result.sampleRate,
          channels: result.channels,
          loudness_lufs: result.loudnessLufs,
          true_peak_db: result.truePeakDb,
          gain_db: result.gainDb,
          tuning_cents: result.tuningCents,
          rendition_mime: result.renditionMime,
          manifest: JSON.stringify(result.manifest) as unknown as object,
          updated_at: trx.fn.now()
        })) > 0
  }
}
export type TakesRepo = ReturnType<typeof createTakesRepo>

/** The reach of a take as SQL: the same rules as server/access/take-relations.ts (a test holds the two together). */
const audibleSql = `(
  (takes.reach = 'group' and (me.role <> 'listener' or not users.is_minor))
  or (takes.reach in ('named', 'group') and exists (select 1 from take_names n where n.take_id = takes.id and n.user_id = :user))
  or (takes.reach in ('my teachers', 'group') and me.role in ('teacher', 'owner') and exists (
        select 1 from teacher_links l where l.group_id = takes.group_id and l.teacher_id = :user and l.student_id = takes.uploader_id
        and l.teacher_agreed_at is not null and l.student_agreed_at is not null))
)`
