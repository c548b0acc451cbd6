import { Link } from 'react-router-dom'
import type { Session } from '@shared/contracts/sessions'
import { paths } from '@client/lib/paths'
import { buttonClass } from '@client/ui/button'
import { Initials } from '@client/ui/initials'
import { PageSection } from '@client/ui/page'
import { useLiveSessions } from './api'

/** Who is listening together right now, with the way in. Nothing stands here while nobody does. */
export function LiveSessions({ groupId }: { groupId: string }) {
  const { data } = useLiveSessions(groupId)
  if (!data || data.items.length === 0) return null
  return (
    <PageSection title="Listening together now">
      <ul className="grid">
        {data.items.map((session) => (
          <SessionRow key={session.id} session={session} />
        ))}
      </ul>
    </PageSection>
  )
}

function SessionRow({ session }: { session: Session }) {
  const here = session.people.filter(({ isHere }) => isHere)
  const leader = session.people.find(({ id }) => id === session.leaderId)
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-b border-rule py-2">
      <div className="min-w-0">
        <p className="break-words">{session.takeTitle}</p>
        <p className="flex flex-wrap items-center gap-x-2 text-sm text-pencil">
          {leader ? `${leader.name} leads` : `started by ${session.startedBy.name}`}
          <span className="flex gap-1">
            {here.map(({ id, name }) => (
              <Initials key={id} id={id} name={name} size={20} leads={id === session.leaderId} />
            ))}
          </span>
        </p>
      </div>
      {session.abilities.includes('session:join') ? (
        <Link to={paths.take(session.takeId, { session: session.id })} className={buttonClass()}>
          Join<span className="sr-only"> {session.takeTitle}</span>
        </Link>
      ) : null}
    </li>
  )
}
