// The margin's People tab: who listens, who leads, how far one has stepped away; or the way to begin.
import type { Session } from '@shared/contracts/sessions'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Initials } from '@client/ui/initials'
import type { DeskSession } from '@client/features/sessions/use-session'

interface SessionPeopleProps {
  session: DeskSession | null
  meId: string
  /** A session already open on this take. */
  live: Session | null
  mayStart: boolean
  isStarting: boolean
  onStart: () => void
  onJoin: (sessionId: string) => void
}

export function SessionPeople({ session, meId, live, mayStart, isStarting, onStart, onJoin }: SessionPeopleProps) {
  if (!session) {
    if (live) {
      const names = live.people.filter((one) => one.isHere).map((one) => one.name)
      return (
        <Empty
          says={
            names.length > 0
              ? `${names.join(', ')} ${names.length === 1 ? 'is' : 'are'} listening to this take now.`
              : 'A listening session is open on this take.'
          }
          how="You will hear what they hear, on one playhead."
          action={
            <Button look="plain" onClick={() => onJoin(live.id)}>
              Join them
            </Button>
          }
        />
      )
    }
    return (
      <Empty
        says="Nobody is listening together."
        how="Open a session and the others join with one click: one playhead, one loop, one speed for everybody."
        action={
          mayStart ? (
            <Button busy={isStarting} onClick={onStart}>
              Listen together
            </Button>
          ) : undefined
        }
      />
    )
  }
  const { state, isLeader } = session
  return (
    <ul className="grid gap-2 py-2">
      {state.session.people.map((one) => {
        const leads = one.id === state.session.leaderId
        const says = !one.isHere ? 'has left' : leads ? 'leads' : one.isAway ? 'stepped away' : 'follows'
        return (
          <li key={one.id} className="flex min-h-9 items-center gap-3">
            <Initials id={one.id} name={one.name} leads={leads} decorative />
            <span className="min-w-0 flex-1 truncate">
              {one.name}
              {one.id === meId ? ' (you)' : null}
              <span className="text-pencil"> · {says}</span>
            </span>
            {isLeader && one.isHere && one.id !== meId ? (
              <Button look="quiet" onClick={() => session.lead(one.id)}>
                Let {one.name.split(' ')[0]} lead
              </Button>
            ) : null}
          </li>
        )
      })}
    </ul>
  )
}
