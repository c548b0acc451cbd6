import type { ReactNode } from 'react'
import type { Take } from '@shared/contracts/takes'
import { Initials } from '@client/ui/initials'

const reachWords = ({ reach }: Take): string =>
  ({
    'only me': 'Only the one who brought it may hear this take.',
    'my teachers': 'The one who brought it and their teachers may hear this take.',
    named: 'The one who brought it and the people named here may hear this take.',
    group: 'Everyone in the group may hear this take.'
  })[reach]

/** Who brought the take and who may hear it; who listens along stands on top of it. */
export function PeoplePanel({ take, children }: { take: Take; children?: ReactNode }) {
  return (
    <div className="grid content-start gap-4 pb-4">
      {children}
      <ul className="grid gap-2">
        <PersonLine id={take.uploader.id} name={take.uploader.name} words="brought it" />
        {take.reach === 'named'
          ? take.named.map(({ id, name }) => <PersonLine key={id} id={id} name={name} words="may hear it" />)
          : null}
      </ul>
      <p className="text-sm text-pencil">{reachWords(take)}</p>
    </div>
  )
}

const PersonLine = ({ id, name, words }: { id: string; name: string; words: string }) => (
  <li className="flex items-center gap-2.5">
    <Initials id={id} name={name} decorative />
    <span>{name}</span>
    <span className="text-sm text-pencil">{words}</span>
  </li>
)
