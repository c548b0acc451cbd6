import type { TeacherLink } from '@shared/contracts/groups'
import type { Db } from '@server/db/knex'
import { person } from '@server/repositories/people'

export type StoredLink = TeacherLink & { groupId: string }

export const createLinksRepo = (db: Db) => {
  const withPeople = (trx: Db) =>
    trx('teacher_links')
      .join('users as teacher', 'teacher.id', 'teacher_links.teacher_id')
      .join('users as student', 'student.id', 'teacher_links.student_id')
      .select(
        'teacher_links.id',
        'teacher_links.group_id',
        'teacher_links.teacher_id',
        'teacher_links.student_id',
        'teacher_links.teacher_agreed_at',
        'teacher_links.student_agreed_at',
        'teacher.name as teacher_name',
        'student.name as student_name'
      )
  const toLink = (row: Awaited<ReturnType<typeof withPeople>>[number]): StoredLink => ({
    id: row.id,
    groupId: row.group_id,
    teacher: person(row.teacher_id, row.teacher_name),
    student: person(row.student_id, row.student_name),
    hasTeacherAgreed: row.teacher_agreed_at !== null,
    hasStudentAgreed: row.student_agreed_at !== null
  })
  return {
    /** The links of a group; with `sideId` only those of that person. */
    ofGroup: async (groupId: string, sideId: string | null): Promise<StoredLink[]> => {
      const query = withPeople(db).where('teacher_links.group_id', groupId).orderBy('teacher_links.created_at')
      if (sideId)
        query.andWhere((q) => q.where('teacher_links.teacher_id', sideId).orWhere('teacher_links.student_id', sideId))
      return (await query).map(toLink)
    },
    find: async (id: string, trx: Db): Promise<StoredLink | null> => {
      const [row] = await withPeople(trx).where('teacher_links.id', id)
      return row ? toLink(row) : null
    },
    insert: async (
      row: { id: string; groupId: string; teacherId: string; studentId: string; byTeacher: boolean },
      trx: Db
    ): Promise<void> => {
      await trx('teacher_links').insert({
        id: row.id,
        group_id: row.groupId,
        teacher_id: row.teacherId,
        student_id: row.studentId,
        [row.byTeacher ? 'teacher_agreed_at' : 'student_agreed_at']: trx.fn.now()
      })
    },
    agree: async (id: string, side: 'teacher' | 'student', trx: Db): Promise<void> => {
      await trx('teacher_links')
        .where({ id })
        .update(side === 'teacher' ? { teacher_agreed_at: trx.fn.now() } : { student_agreed_at: trx.fn.now() })
    },
    remove: async (id: string, trx: Db): Promise<void> => {
      await trx('teacher_links').where({ id }).delete()
    }
  }
}
export type LinksRepo = ReturnType<typeof createLinksRepo>
