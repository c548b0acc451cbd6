import { useState } from 'react'
import { Link } from 'react-router-dom'
import type { Take } from '@shared/contracts/takes'
import { paths } from '@client/lib/paths'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Figures } from '@client/ui/figures'
import { Initials } from '@client/ui/initials'
import { Notice } from '@client/ui/notice'
import { PageSection } from '@client/ui/page'
import { RelativeTime } from '@client/ui/relative-time'
import { useGroupTakes, useGroupTunes } from './api'
import { counted, lengthWords } from './list-words'

export interface TakeListProps {
  groupId: string
  /** How recordings get here, for those who may add some. */
  how?: string
}

/** The takes the reader may hear, newest first, a page at a time. */
export function TakeList({ groupId, how }: TakeListProps) {
  const [cursors, setCursors] = useState<(string | undefined)[]>([undefined])
  const first = useGroupTakes(groupId)
  const tunes = useGroupTunes(groupId)
  const titles = new Map(tunes.data?.items.map(({ id, title }) => [id, title]))
  return (
    <PageSection title="Takes">
      {first.error ? (
        <Notice kind="fault" next={<Button onClick={() => void first.refetch()}>Try again</Button>}>
          {first.error.message}
        </Notice>
      ) : null}
      {first.data?.items.length === 0 ? (
        <Empty says="Recordings shared with you stand here." how={how} />
      ) : (
        <ul className="grid">
          {cursors.map((cursor, index) => (
            <TakePage
              key={cursor ?? 'first'}
              groupId={groupId}
              titles={titles}
              {...(cursor ? { cursor } : {})}
              {...(index === cursors.length - 1 ? { onMore: (next: string) => setCursors([...cursors, next]) } : {})}
            />
          ))}
        </ul>
      )}
    </PageSection>
  )
}

interface TakePageProps {
  groupId: string
  titles: ReadonlyMap<string, string>
  cursor?: string
  /** Given to the last page only. */
  onMore?: (cursor: string) => void
}

function TakePage({ groupId, titles, cursor, onMore }: TakePageProps) {
  const { data } = useGroupTakes(groupId, cursor)
  const next = data?.nextCursor
  return (
    <>
      {data?.items.map((take) => (
        <TakeRow key={take.id} take={take} tune={take.tuneId ? titles.get(take.tuneId) : undefined} />
      ))}
      {next && onMore ? (
        <li className="py-3">
          <Button onClick={() => onMore(next)}>Show older takes</Button>
        </li>
      ) : null}
    </>
  )
}

function TakeRow({ take, tune }: { take: Take; tune: string | undefined }) {
  return (
    <li className="grid gap-0.5 border-b border-rule py-2">
      <div className="flex items-baseline justify-between gap-4">
        <Link to={paths.take(take.id)} className="min-w-0 py-0.5 break-words">
          {take.title}
        </Link>
        {take.durationSec === null ? null : (
          <span className="flex-none text-pencil">
            <Figures>{lengthWords(take.durationSec)}</Figures>
          </span>
        )}
      </div>
      <div className="flex items-start gap-2 text-sm text-pencil">
        <Initials id={take.uploader.id} name={take.uploader.name} size={20} decorative />
        <p className="min-w-0 break-words">
          {take.uploader.name}
          {tune ? ` · ${tune}` : null}
          {' · '}
          <RelativeTime at={take.createdAt} notFocusable />
          <TakeState take={take} />
        </p>
      </div>
    </li>
  )
}

function TakeState({ take }: { take: Take }) {
  if (take.state === 'failed') return <span className="text-fault"> · ! could not be read</span>
  if (take.state === 'waiting') return ' · waiting to be read'
  if (take.state === 'working') return ` · being read, ${Math.floor(take.progress * 100)} %`
  if (take.openCount > 0) return <span className="text-claim"> · {take.openCount} open</span>
  return take.commentCount > 0 ? ` · ${counted(take.commentCount, 'comment')}` : null
}
