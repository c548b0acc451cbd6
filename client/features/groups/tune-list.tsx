import type { ReactNode } from 'react'
import { Link } from 'react-router-dom'
import type { Tune } from '@shared/contracts/tunes'
import { formLength } from '@shared/music/form'
import { paths } from '@client/lib/paths'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Notice } from '@client/ui/notice'
import { PageSection } from '@client/ui/page'
import { useGroupTunes } from './api'
import { counted } from './list-words'

export interface TuneListProps {
  groupId: string
  /** The button that adds a tune, for those who may. */
  action?: ReactNode
}

/** Key, meter where it is not 4/4, bars and takes, as far as they are known. */
const facts = ({ chart, takeCount }: Tune): string => {
  const bars = formLength(chart)
  return [
    chart.key || 'no key yet',
    chart.meter === '4/4' ? null : chart.meter,
    bars > 0 ? counted(bars, 'bar') : 'no form yet',
    takeCount > 0 ? counted(takeCount, 'take') : 'no takes yet'
  ]
    .filter((fact) => fact !== null)
    .join(' · ')
}

export function TuneList({ groupId, action }: TuneListProps) {
  const { data, error, refetch } = useGroupTunes(groupId)
  return (
    <PageSection title="Tunes" aside={data && data.items.length > 0 ? action : null}>
      {error ? (
        <Notice kind="fault" next={<Button onClick={() => void refetch()}>Try again</Button>}>
          {error.message}
        </Notice>
      ) : null}
      {data?.items.length === 0 ? (
        <Empty
          says="The pieces this group works on stand here."
          how="A tune has a key, a form and a chart, and takes are put to it."
          action={action}
        />
      ) : (
        <ul className="grid">
          {data?.items.map((tune) => (
            <li key={tune.id} className="flex min-h-10 flex-wrap items-center gap-x-4 border-b border-rule py-1.5">
              <Link to={paths.tune(tune.id)} className="min-w-0 flex-[1_1_12rem] py-0.5 break-words">
                {tune.title}
              </Link>
              <span className="text-sm text-pencil">{facts(tune)}</span>
            </li>
          ))}
        </ul>
      )}
    </PageSection>
  )
}
