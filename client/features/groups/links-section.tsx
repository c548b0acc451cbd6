import { useState } from 'react'
import { allows } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { Group, TeacherLink } from '@shared/contracts/groups'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Notice } from '@client/ui/notice'
import { PageSection } from '@client/ui/page'
import { useAgreeToLink, useEndLink } from './api'
import { SureDialog } from './sure-dialog'

export interface LinksSectionProps {
  group: Group
  links: readonly TeacherLink[]
  meId: string
}

const isSide = ({ teacher, student }: TeacherLink, meId: string): boolean => teacher.id === meId || student.id === meId
const isAgreed = ({ hasTeacherAgreed, hasStudentAgreed }: TeacherLink): boolean => hasTeacherAgreed && hasStudentAgreed
const isOpenFor = ({ teacher, hasTeacherAgreed, hasStudentAgreed }: TeacherLink, meId: string): boolean =>
  teacher.id === meId ? !hasTeacherAgreed : !hasStudentAgreed

const words = (link: TeacherLink, meId: string): string => {
  const { teacher, student, hasTeacherAgreed } = link
  if (!isSide(link, meId)) {
    if (isAgreed(link)) return `${teacher.name} teaches ${student.name}`
    return hasTeacherAgreed
      ? `${teacher.name} asks to teach ${student.name}`
      : `${student.name} asks ${teacher.name} to teach them`
  }
  const isTeacher = teacher.id === meId
  const other = isTeacher ? student.name : teacher.name
  if (isAgreed(link)) return isTeacher ? `You teach ${other}` : `${other} teaches you`
  if (isOpenFor(link, meId)) return isTeacher ? `${other} asks you to teach them` : `${other} asks to teach you`
  return isTeacher ? `You asked ${other} to be your student` : `You asked ${other} to teach you`
}

/** Who teaches whom; both sides agree before anything is heard. */
export function LinksSection({ group, links, meId }: LinksSectionProps) {
  return (
    <PageSection title="Teachers and students">
      {links.length === 0 ? (
        <Empty
          says="Who teaches you here, and whom you teach."
          how={
            group.abilities.includes('group:link')
              ? 'Ask somebody above to teach you or to be your student. Once both have agreed, a teacher hears what their student shares with “me and my teachers”.'
              : 'A teacher of the group can ask you to be their student.'
          }
        />
      ) : (
        <ul className="grid">
          {links.map((link) => (
            <LinkRow key={link.id} link={link} group={group} meId={meId} />
          ))}
        </ul>
      )}
    </PageSection>
  )
}

function LinkRow({ link, group, meId }: { link: TeacherLink; group: Group; meId: string }) {
  const agree = useAgreeToLink()
  const end = useEndLink()
  const [isAsking, setAsking] = useState(false)
  const held = new Set<Relation>(isSide(link, meId) ? [group.role, 'author'] : [group.role])
  const params = { linkId: link.id }
  const isWaitingForMe = isSide(link, meId) && isOpenFor(link, meId)
  const ending = isWaitingForMe ? 'Decline' : isAgreed(link) || !isSide(link, meId) ? 'End' : 'Take back'
  const handleEnd = (): void => end.mutate({ params }, { onSuccess: () => setAsking(false) })
  const problem = agree.error ?? (isAsking ? null : end.error)
  return (
    <li className="grid gap-2 border-b border-rule py-1.5">
      <div className="flex min-h-9 items-center justify-between gap-4">
        <div className="min-w-0">
          <p className="break-words">{words(link, meId)}</p>
          {isWaitingForMe ? (
            <p className="text-sm text-pencil">
              {link.student.id === meId
                ? 'If you agree, they hear and may mark what you share with “me and my teachers”.'
                : 'If you agree, you hear what they share with their teachers.'}
            </p>
          ) : isAgreed(link) ? null : (
            <p className="text-sm text-pencil">not agreed yet</p>
          )}
        </div>
        <div className="flex flex-none flex-wrap justify-end gap-x-2 gap-y-1">
          {isWaitingForMe && allows('link:agree', held) ? (
            <Button busy={agree.isPending} onClick={() => agree.mutate({ params })}>
              Agree
            </Button>
          ) : null}
          {allows('link:end', held) ? (
            <Button
              look="quiet"
              busy={end.isPending}
              onClick={() => (isAgreed(link) ? setAsking(true) : handleEnd())}
              aria-label={`${ending}: ${words(link, meId)}`}
            >
              {ending}
            </Button>
          ) : null}
        </div>
      </div>
      {problem ? <Notice kind="fault">{problem.message}</Notice> : null}
      {isAsking ? (
        <SureDialog
          title="End this link?"
          keep="Keep it"
          confirm="End it"
          isBusy={end.isPending}
          problem={end.error}
          onConfirm={handleEnd}
          onClose={() => setAsking(false)}
        >
          {words(link, meId)}. After this, {link.teacher.id === meId ? 'you' : link.teacher.name} will not hear what{' '}
          {link.student.id === meId ? 'you share' : `${link.student.name} shares`} with teachers. What was written
          stays.
        </SureDialog>
      ) : null}
    </li>
  )
}
