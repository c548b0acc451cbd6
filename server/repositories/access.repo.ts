// The facts that relations are made of, one query a resource.
import type { Db } from '@server/db/knex'
import type { Role } from '@shared/contracts/common'
import type { Reach } from '@shared/contracts/takes'

export interface TakeStanding {
  groupId: string
  role: Role | null
  isUploader: boolean
  reach: Reach
  isNamed: boolean
  isLinkedTeacher: boolean
  isUploaderMinor: boolean
}

interface TakeStandingRow {
  group_id: string
  role: Role | null
  is_uploader: boolean
  reach: Reach
  is_named: boolean
  is_linked_teacher: boolean
  is_uploader_minor: boolean
}

/** How one person stands to one take; `:user` is bound twice per column, never joined into the text. */
const standingColumns = `
  t.group_id, t.reach, (t.uploader_id = :user) as is_uploader,
  (select m.role from memberships m where m.group_id = t.group_id and m.user_id = :user) as role,
  exists (select 1 from take_names n where n.take_id = t.id and n.user_id = :user) as is_named,
  exists (select 1 from teacher_links l where l.group_id = t.group_id and l.teacher_id = :user and l.student_id = t.uploader_id
          and l.teacher_agreed_at is not null and l.student_agreed_at is not null) as is_linked_teacher,
  (select u.is_minor from users u where u.id = t.uploader_id) as is_uploader_minor`

const toStanding = (row: TakeStandingRow): TakeStanding => ({
  groupId: row.group_id,
  role: row.role,
  isUploader: row.is_uploader,
  reach: row.reach,
  isNamed: row.is_named,
  isLinkedTeacher: row.is_linked_teacher,
  isUploaderMinor: row.is_uploader_minor
})

export const createAccessRepo = (db: Db) => ({
  roleIn: async (userId: string, groupId: string, trx: Db = db): Promise<Role | null> => {
    const row = await trx('memberships').where({ group_id: groupId, user_id: userId }).first('role')
    return row?.role ?? null
  },
  /** The group's row, locked until the transaction ends. Every write takes it first, before any other row of the group:
      then nobody waits in a circle, and nobody's rights change under a write. */
  lockGroup: async (groupId: string): Promise<void> => {
    await db('groups').where({ id: groupId }).forNoKeyUpdate().first('id')
  },
  groupExists: async (groupId: string): Promise<boolean> =>
    Boolean(await db('groups').where({ id: groupId }).first('id')),
  tune: (tuneId: string) => db('tunes').where({ id: tuneId }).first('group_id', 'created_by'),
  invitation: (id: string) => db('invitations').where({ id }).first('group_id', 'created_by'),
  link: (id: string) => db('teacher_links').where({ id }).first('group_id', 'teacher_id', 'student_id'),
  recording: (id: string) => db('recordings').where({ id }).first('group_id', 'uploader_id'),
  comment: (id: string) => db('comments').where({ id }).first('take_id', 'author_id'),
  reply: (id: string) =>
    db('replies')
      .join('comments', 'comments.id', 'replies.comment_id')
      .where('replies.id', id)
      .first('comments.take_id', 'replies.author_id'),
  savedLoop: (id: string) => db('saved_loops').where({ id }).first('take_id', 'user_id'),
  clip: (id: string) => db('clips').where({ id }).where('expires_at', '>', db.fn.now()).first('take_id', 'user_id'),
  session: (id: string) => db('sessions').where({ id }).first('take_id', 'started_by'),
  takeStanding: async (userId: string, takeId: string): Promise<TakeStanding | null> => {
    const result = await db.raw<{ rows: TakeStandingRow[] }>(
      `select ${standingColumns} from takes t where t.id = :take`,
      {
        user: userId,
        take: takeId
      }
    )
    const row = result.rows[0]
    return row ? toStanding(row) : null
  },
  /** The same for every take of a group at once. */
  takeStandings: async (userId: string, takeIds: string[]): Promise<Map<string, TakeStanding>> => {
    const result = await db.raw<{ rows: (TakeStandingRow & { id: string })[] }>(
      `select t.id, ${standingColumns} from takes t where t.id = any(:takes::uuid[])`,
      { user: userId, takes: takeIds }
    )
    return new Map(result.rows.map((row) => [row.id, toStanding(row)]))
  }
})
export type AccessRepo = ReturnType<typeof createAccessRepo>
