import { Link } from 'react-router-dom'
import type { Comment } from '@shared/contracts/comments'
import type { Group } from '@shared/contracts/groups'
import type { Session } from '@shared/contracts/sessions'
import type { Take } from '@shared/contracts/takes'
import { timeWords } from '@shared/timing/time-words'
import { paths } from '@client/lib/paths'
import { Button, buttonClass } from '@client/ui/button'
import { Figures } from '@client/ui/figures'
import { Initials } from '@client/ui/initials'
import { PageSection } from '@client/ui/page'
import { RelativeTime } from '@client/ui/relative-time'
import { useCommentsOn, useNewestTakes, useSessionsNow } from './api'
import { useHeard } from './heard-store'
import { commentsToAnswer, takesToHear, takesWithQuestions } from './waiting-for'

/** No more rows than this of a kind: the rest is in the groups. */
const shownAtMost = 8

/** What waits: people listening now, what to hear, what to answer. Each only when there is something. */
export function Waiting({ meId, groups }: { meId: string; groups: readonly Group[] }) {
  const takes = useNewestTakes(groups)
  const sessions = useSessionsNow(groups)
  const { heard, markHeard, clear } = useHeard(meId)
  const asked = takesWithQuestions(takes, meId).slice(0, shownAtMost)
  const toAnswer = commentsToAnswer(useCommentsOn(asked), meId)
  const toHear = heard ? takesToHear(takes, meId, heard) : []
  const nameOf = (groupId: string) => groups.find(({ id }) => id === groupId)?.name ?? ''
  const byGroup = groups
    .map((group) => ({ group, takes: toHear.filter(({ groupId }) => groupId === group.id) }))
    .filter((part) => part.takes.length > 0)

  return (
    <>
      {sessions.length > 0 ? (
        <PageSection title="Listening together now">
          <ul className="grid">
            {sessions.map((session) => (
              <SessionRow key={session.id} session={session} groupName={nameOf(session.groupId)} />
            ))}
          </ul>
        </PageSection>
      ) : null}
      {toHear.length > 0 ? (
        <PageSection
          title="To hear"
          aside={
            <Button look="quiet" onClick={clear}>
              Clear this list
            </Button>
          }
        >
          {byGroup.map(({ group, takes: some }) => (
            <div key={group.id} className="grid gap-1">
              {groups.length > 1 ? <h3 className="text-sm text-pencil">{group.name}</h3> : null}
              <ul className="grid">
                {some.slice(0, shownAtMost).map((take) => (
                  <TakeToHear key={take.id} take={take} onOpen={() => markHeard(take.id)} />
                ))}
              </ul>
              {some.length > shownAtMost ? (
                <Link to={paths.group(group.id)} className="justify-self-start py-1 text-sm">
                  {some.length - shownAtMost} more in {group.name}
                </Link>
              ) : null}
            </div>
          ))}
        </PageSection>
      ) : null}
      {toAnswer.length > 0 ? (
        <PageSection title="To answer">
          <ul className="grid">
            {toAnswer.slice(0, shownAtMost).map((comment) => (
              <CommentToAnswer
                key={comment.id}
                comment={comment}
                take={asked.find(({ id }) => id === comment.takeId)}
              />
            ))}
          </ul>
        </PageSection>
      ) : null}
    </>
  )
}

function SessionRow({ session, groupName }: { session: Session; groupName: string }) {
  const here = session.people.filter(({ isHere }) => isHere)
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-b border-rule py-2">
      <div className="min-w-0">
        <p className="break-words">{session.takeTitle}</p>
        <p className="flex flex-wrap items-center gap-x-2 text-sm text-pencil">
          {groupName}
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

function TakeToHear({ take, onOpen }: { take: Take; onOpen: () => void }) {
  return (
    <li className="grid gap-0.5 border-b border-rule py-2">
      <div className="flex items-baseline justify-between gap-4">
        <Link to={paths.take(take.id)} onClick={onOpen} className="min-w-0 py-0.5 break-words">
          {take.title}
        </Link>
        {take.durationSec === null ? null : (
          <span className="flex-none text-pencil">
            <Figures>{timeWords(take.durationSec)}</Figures>
          </span>
        )}
      </div>
      <p className="flex flex-wrap items-center gap-x-2 text-sm text-pencil">
        <Initials id={take.uploader.id} name={take.uploader.name} size={20} decorative />
        <span className="break-words">{take.uploader.name}</span>
        <span>
          · <RelativeTime at={take.createdAt} notFocusable />
        </span>
        {take.openCount > 0 ? <span className="text-claim">· {take.openCount} open</span> : null}
      </p>
    </li>
  )
}

function CommentToAnswer({ comment, take }: { comment: Comment; take: Take | undefined }) {
  return (
    <li className="grid gap-0.5 border-b border-rule py-2">
      <Link to={paths.take(comment.takeId, { comment: comment.id })} className="line-clamp-2 min-w-0 break-words">
        {comment.text}
      </Link>
      <p className="flex flex-wrap items-center gap-x-2 text-sm text-pencil">
        <Initials id={comment.author.id} name={comment.author.name} size={20} decorative />
        <span className="break-words">
          {comment.author.name} · <span className="text-claim">{comment.kind}</span>
        </span>
        {take ? <span className="break-words">· {take.title}</span> : null}
        <span>
          · <RelativeTime at={comment.createdAt} notFocusable />
        </span>
      </p>
    </li>
  )
}
