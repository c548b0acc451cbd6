import { useState } from 'react'
import type { Group, GroupPerson, TeacherLink } from '@shared/contracts/groups'
import { freshId } from '@client/lib/ids'
import { Initials } from '@client/ui/initials'
import { Menu, type MenuItem } from '@client/ui/menu'
import { Notice } from '@client/ui/notice'
import { RelativeTime } from '@client/ui/relative-time'
import { useToast } from '@client/ui/toasts'
import { useAskForLink } from './api'
import { LeaveDialog } from './leave-dialog'
import { RemoveDialog } from './remove-dialog'
import { RoleDialog } from './role-dialog'
import { mayTeach, roleWords } from './role-words'

export interface RosterProps {
  group: Group
  people: readonly GroupPerson[]
  links: readonly TeacherLink[]
  meId: string
}

type Asking = { what: 'role' | 'remove' | 'leave'; person: GroupPerson } | null

/** The people of the group, as far as the reader may know of them. */
export function Roster({ group, people, links, meId }: RosterProps) {
  const [asking, setAsking] = useState<Asking>(null)
  const ask = useAskForLink()
  const toast = useToast()
  const me = people.find(({ id }) => id === meId)
  const can = (ability: string): boolean => group.abilities.includes(ability)
  const areLinked = (teacherId: string, studentId: string): boolean =>
    links.some(({ teacher, student }) => teacher.id === teacherId && student.id === studentId)
  const handleAsk = (teacherId: string, studentId: string, other: GroupPerson): void =>
    ask.mutate(
      { params: { groupId: group.id }, body: { id: freshId(), teacherId, studentId } },
      { onSuccess: () => toast({ text: `${other.name} has been asked. The link holds once they agree.` }) }
    )

  const itemsOf = (person: GroupPerson): MenuItem[] => {
    const items: MenuItem[] = []
    const isMe = person.id === meId
    const add = (key: string, label: string, onChoose: () => void, grave = false): void =>
      void items.push({ key, label, onChoose, grave })
    if (can('group:link') && me && !isMe) {
      if (mayTeach(person.role) && !areLinked(person.id, meId))
        add('teacher', 'Ask to teach you', () => handleAsk(person.id, meId, person))
      if (mayTeach(me.role) && !areLinked(meId, person.id))
        add('student', 'Ask to be your student', () => handleAsk(meId, person.id, person))
    }
    if (can('group:set-role')) add('role', 'Change role', () => setAsking({ what: 'role', person }))
    if (can('group:set-role') && !isMe)
      add('remove', 'Remove from the group', () => setAsking({ what: 'remove', person }), true)
    if (can('group:leave') && isMe) add('leave', 'Leave the group', () => setAsking({ what: 'leave', person }), true)
    return items
  }
  const close = (): void => setAsking(null)
  return (
    <>
      {ask.error ? <Notice kind="fault">{ask.error.message}</Notice> : null}
      <ul className="grid">
        {people.map((person) => (
          <Row key={person.id} person={person} isMe={person.id === meId} items={itemsOf(person)} />
        ))}
      </ul>
      {asking?.what === 'role' ? <RoleDialog groupId={group.id} person={asking.person} onClose={close} /> : null}
      {asking?.what === 'remove' ? <RemoveDialog groupId={group.id} person={asking.person} onClose={close} /> : null}
      {asking?.what === 'leave' ? <LeaveDialog group={group} onClose={close} /> : null}
    </>
  )
}

function Row({ person, isMe, items }: { person: GroupPerson; isMe: boolean; items: MenuItem[] }) {
  return (
    <li className="flex min-h-12 items-center gap-3 border-b border-rule py-1.5">
      <Initials id={person.id} name={person.name} decorative />
      <div className="min-w-0 flex-1">
        <p className="break-words">
          {person.name}
          {isMe ? <span className="text-pencil"> (you)</span> : null}
        </p>
        <p className="text-sm text-pencil">
          {roleWords[person.role]} · joined <RelativeTime at={person.joinedAt} notFocusable />
          {person.isMinor ? <Minor hasConsent={person.hasGuardianConsent} /> : null}
        </p>
      </div>
      {items.length > 0 ? <Menu label={`What to do about ${person.name}`} icon="more" items={items} /> : null}
    </li>
  )
}

/** Only owners and teachers are told who is under age. */
function Minor({ hasConsent }: { hasConsent: boolean }) {
  return hasConsent ? (
    <span className="block">under age, a guardian has agreed</span>
  ) : (
    <span className="block text-fault">! under age, no guardian has agreed yet</span>
  )
}
