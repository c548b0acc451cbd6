// At the right of the desk's bar: who leads, who is here, stepping away and back, leaving.
import { Button } from '@client/ui/button'
import { Initials } from '@client/ui/initials'
import { VisuallyHidden } from '@client/ui/visually-hidden'
import { Menu, type MenuItem } from '@client/ui/menu'
import type { DeskSession } from '@client/features/sessions/use-session'

interface SessionBarProps {
  session: DeskSession
  meId: string
  onEnd: () => void
}

const mostShown = 5

export function SessionBar({ session, meId, onEnd }: SessionBarProps) {
  const { state, isLeader, leaderName } = session
  const here = state.session.people.filter((one) => one.isHere)
  const mayEnd = state.session.abilities.includes('session:end')
  const mayTakeLead = !isLeader && (state.session.startedBy.id === meId || leaderName === null)
  const items: MenuItem[] = [
    ...(isLeader
      ? here
          .filter((one) => one.id !== meId)
          .map((one) => ({ key: one.id, label: `Let ${one.name} lead`, onChoose: () => session.lead(one.id) }))
      : []),
    ...(mayTakeLead ? [{ key: 'take', label: 'Take the lead', onChoose: () => session.lead(meId) }] : []),
    { key: 'leave', label: 'Leave the session', onChoose: session.leave },
    ...(mayEnd ? [{ key: 'end', label: 'End it for everybody', grave: true, onChoose: onEnd }] : [])
  ]
  const leads = isLeader ? 'you lead' : leaderName ? `${leaderName.split(' ')[0]} leads` : 'nobody leads'
  return (
    <div role="group" aria-label="Listening session" className="flex flex-wrap items-center gap-x-3 gap-y-1">
      <p className="text-sm text-pencil">
        {state.isConnected ? `Listening together, ${leads}` : 'Connection lost, coming back'}
        {state.isAway ? ' · you have stepped away' : null}
      </p>
      <ul aria-label="Here now" className="flex items-center gap-1">
        {here.slice(0, mostShown).map((one) => (
          <li key={one.id} className={one.isAway ? 'opacity-60' : undefined}>
            <Initials id={one.id} name={one.name} leads={one.id === state.session.leaderId} />
            {one.isAway ? <VisuallyHidden>has stepped away</VisuallyHidden> : null}
          </li>
        ))}
        {here.length > mostShown ? <li className="text-sm text-pencil">and {here.length - mostShown} more</li> : null}
      </ul>
      {isLeader ? null : (
        <Button onClick={() => session.step(!state.isAway)}>{state.isAway ? 'Step back in' : 'Step away'}</Button>
      )}
      <Menu label="Session" items={items} />
    </div>
  )
}
