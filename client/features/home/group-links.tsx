import { Link } from 'react-router-dom'
import type { Group } from '@shared/contracts/groups'
import { paths } from '@client/lib/paths'
import { PageSection } from '@client/ui/page'

export function GroupLinks({ groups }: { groups: readonly Group[] }) {
  if (groups.length === 0) return null
  return (
    <PageSection title={groups.length === 1 ? 'Your group' : 'Your groups'}>
      <ul className="flex flex-wrap gap-x-6 gap-y-1">
        {groups.map(({ id, name }) => (
          <li key={id} className="min-w-0">
            <Link to={paths.group(id)} className="inline-flex min-h-6 items-center break-words">
              {name}
            </Link>
          </li>
        ))}
      </ul>
    </PageSection>
  )
}
