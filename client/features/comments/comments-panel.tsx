import { memo, useEffect, useMemo, useRef, useState, type KeyboardEvent } from 'react'
import type { CommentKind } from '@shared/contracts/comments'
import type { PlaceWords } from '@shared/timing/place-words'
import type { Span } from '@shared/timing/types'
import { useLatest } from '@client/lib/use-latest'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Notice } from '@client/ui/notice'
import { useToast } from '@client/ui/toasts'
import type { TakeComments } from './api'
import type { ShownComment } from './changes'
import { CommentArticle, type CommentArticleProps, type CommentHands } from './comment-article'
import type { SpanEdge } from './move-row'
import { shortNames } from './short-names'
import { SmallButton } from './small-button'
import { useGrowing } from './use-growing'
import { WriteBox } from './write-box'

export interface CommentsPanelProps {
  comments: TakeComments
  letters: ReadonlyMap<string, string>
  canComment: boolean
  selection: Span | null
  selectedId: string | null
  placeOf: (span: Span) => PlaceWords
  /** The span of the bar the line is in; the moment itself without bars. */
  spanHere: () => Span
  hereKey: number | null
  nudged: (span: Span, edge: SpanEdge, steps: number) => Span
  focusCount: number
  onListen: (comment: ShownComment) => void
  onSaid: (commentId: string) => void
  /** A deletion happened; `undo` brings it back for a while. */
  onRemoved?: (undo: () => boolean) => void
}

type Filter = 'all' | 'open'

/** The margin: what was said about the take, in the order of its bars. */
export function CommentsPanel(props: CommentsPanelProps) {
  const { comments: said, letters, placeOf, selectedId } = props
  const { comments, acts, me } = said
  const [filter, setFilter] = useState<Filter>('all')
  const feed = useRef<HTMLDivElement>(null)
  const toast = useToast()
  const latest = useLatest(props)
  const openCount = useMemo(() => comments.filter(({ isOpen }) => isOpen).length, [comments])
  const shown = filter === 'open' ? comments.filter(({ isOpen }) => isOpen) : comments
  const drawn = useGrowing(shown.length, selectedId ? shown.findIndex(({ id }) => id === selectedId) + 1 : 0)

  const people = comments.flatMap(({ author, settledBy, replies }) => [
    author,
    ...(settledBy ? [settledBy] : []),
    ...replies.map((reply) => reply.author)
  ])
  // Articles are drawn anew when the people change, not with every comment.
  const peopleKey = JSON.stringify([...new Map(people.map(({ id, name }) => [id, name]))].sort())
  const names = useMemo(
    () => shortNames((JSON.parse(peopleKey) as [string, string][]).map(([id, name]) => ({ id, name }))),
    [peopleKey]
  )
  const hands = useMemo<CommentHands>(() => {
    const gone = (text: string, undo: () => boolean) => {
      toast({ text, undo: () => void undo() })
      latest.current.onRemoved?.(undo)
    }
    return {
      memberId: me.id,
      names,
      acts,
      onListen: (comment) => latest.current.onListen(comment),
      onRemove: (comment) => gone('Comment deleted.', acts.remove(comment.id)),
      onRemoveReply: (commentId, replyId) => gone('Answer deleted.', acts.removeReply(commentId, replyId)),
      nudged: (span, edge, steps) => latest.current.nudged(span, edge, steps)
    }
  }, [acts, me.id, names, toast, latest])

  useEffect(() => {
    if (!selectedId) return
    const article = feed.current?.querySelector<HTMLElement>(`[data-comment="${selectedId}"]`)
    article?.scrollIntoView({ block: 'nearest' })
  }, [selectedId])

  const handleKey = (event: KeyboardEvent) => {
    const step = { PageDown: 1, PageUp: -1 }[event.key]
    const target = event.target as HTMLElement
    if (!step || target.closest('textarea, select')) return
    const all = [...(feed.current?.querySelectorAll<HTMLElement>('article') ?? [])]
    const next = all[all.findIndex((article) => article.contains(target)) + step]
    event.preventDefault()
    next?.focus()
  }

  const handleSay = (kind: CommentKind, text: string, span: Span) => props.onSaid(acts.say(kind, text, span))

  return (
    <div className="flex min-h-0 flex-col lg:h-full">
      {comments.length > 0 ? (
        <div className="flex flex-none items-center gap-2 pb-1 text-sm text-pencil">
          <fieldset aria-label="Which comments" className="flex gap-2">
            <FilterButton isOn={filter === 'all'} onClick={() => setFilter('all')}>
              {`all ${comments.length}`}
            </FilterButton>
            <FilterButton isOn={filter === 'open'} onClick={() => setFilter('open')}>
              {`open ${openCount}`}
            </FilterButton>
          </fieldset>
        </div>
      ) : null}
      {said.fault && said.isLoading === false && comments.length === 0 ? (
        <Notice kind="fault" next={<Button onClick={said.refetch}>Ask again</Button>}>
          {said.fault.message}
        </Notice>
      ) : null}
      {/* APG feed: Page keys go from article to article. */}
      {/* oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions, jsx-a11y/no-static-element-interactions */}
      <div
        ref={feed}
        // A feed without articles is none (WAI-ARIA: required owned elements).
        role={shown.length > 0 ? 'feed' : undefined}
        aria-label={shown.length > 0 ? 'Comments' : undefined}
        aria-busy={said.isLoading || drawn < shown.length}
        onKeyDown={handleKey}
        className={shown.length > 0 ? 'order-2 min-h-0 flex-1 lg:order-none lg:overflow-y-auto' : undefined}
      >
        {shown.slice(0, drawn).map((comment, index) => (
          <PlacedArticle
            key={comment.id}
            comment={comment}
            letter={letters.get(comment.id) ?? ''}
            index={index + 1}
            count={shown.length}
            isSelected={comment.id === selectedId}
            selection={comment.id === selectedId ? props.selection : null}
            placeOf={placeOf}
            hands={hands}
          />
        ))}
      </div>
      {!said.isLoading && !said.fault && shown.length === 0 ? (
        <div className="order-2 flex-1 lg:order-none">
          <Empty
            says={
              comments.length === 0
                ? 'What you hear in this take stands here, beside its bars.'
                : 'Nothing is open: every question is settled.'
            }
            how={comments.length === 0 && props.canComment ? 'Select a stretch of it, then write about it.' : undefined}
          />
        </div>
      ) : null}
      {props.canComment ? (
        <div className="flex-none pt-3 pb-3 lg:pb-0">
          <WriteBox
            memberId={me.id}
            takeId={said.takeId}
            selection={props.selection}
            spanHere={props.spanHere}
            hereKey={props.hereKey}
            placeOf={placeOf}
            focusCount={props.focusCount}
            onSay={handleSay}
          />
        </div>
      ) : null}
    </div>
  )
}

function FilterButton({ isOn, onClick, children }: { isOn: boolean; onClick: () => void; children: string }) {
  return (
    <SmallButton aria-pressed={isOn} onClick={onClick}>
      <span className={isOn ? 'font-semibold text-ink' : undefined}>{children}</span>
    </SmallButton>
  )
}

/** The words of the place are made anew only when the span, the bars or the chart change. */
const PlacedArticle = memo(function PlacedArticle({
  comment,
  placeOf,
  ...rest
}: Omit<CommentArticleProps, 'place'> & { placeOf: (span: Span) => PlaceWords }) {
  const { startSec, endSec } = comment
  const place = useMemo(() => placeOf({ startSec, endSec }), [placeOf, startSec, endSec])
  return <CommentArticle {...rest} comment={comment} place={place} />
})
