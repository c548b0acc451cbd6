import { memo, useState, type ReactNode } from 'react'
import { CommentKind, opens } from '@shared/contracts/comments'
import { limits } from '@shared/limits'
import type { PlaceWords } from '@shared/timing/place-words'
import type { Span } from '@shared/timing/types'
import { cx } from '@client/ui/classes'
import { Menu, type MenuItem } from '@client/ui/menu'
import type { CommentActs } from './api'
import type { ShownComment } from './changes'
import { KindChoice } from './kind-choice'
import { MoveRow, type SpanEdge } from './move-row'
import { Refused } from './refused'
import { ReplyForm } from './reply-form'
import { ReplyItem } from './reply-item'
import { SaidBy } from './said-by'
import { SmallButton } from './small-button'
import { WordsForm } from './words-form'

/** What all comments of the margin share; the same object from one drawing to the next. */
export interface CommentHands {
  memberId: string
  /** Short names by id. */
  names: ReadonlyMap<string, string>
  acts: CommentActs
  /** Jump to it, loop it, mark it on the waveform. */
  onListen: (comment: ShownComment) => void
  onRemove: (comment: ShownComment) => void
  onRemoveReply: (commentId: string, replyId: string) => void
  nudged: (span: Span, edge: SpanEdge, steps: number) => Span
}

export interface CommentArticleProps {
  comment: ShownComment
  letter: string
  place: PlaceWords
  isSelected: boolean
  /** From 1, among those shown. */
  index: number
  count: number
  /** Only where it is selected: what it could be moved to. */
  selection: Span | null
  hands: CommentHands
}

type Doing = 'reading' | 'answering' | 'editing' | 'moving'

/** A note in the margin: letter, place, words, who said it, what was answered. */
export const CommentArticle = memo(function CommentArticle(props: CommentArticleProps) {
  const { comment, letter, place, isSelected, hands } = props
  const { acts } = hands
  const [doing, setDoing] = useState<Doing>('reading')
  const can = (ability: string) => comment.abilities.includes(ability)
  const called = ({ id, name }: { id: string; name: string }) => hands.names.get(id) ?? name
  const isSettled = opens(comment.kind) && !comment.isOpen
  const label = `Comment ${letter}, ${place.place}, ${comment.kind}${isSettled ? ', settled' : ''}, by ${comment.author.name}`

  const items: MenuItem[] = []
  if (can('comment:edit'))
    items.push(
      { key: 'edit', label: 'Change the words', icon: 'pencil', onChoose: () => setDoing('editing') },
      {
        key: 'move',
        label: 'Move it',
        icon: 'arrowRight',
        onChoose: () => {
          hands.onListen(comment)
          setDoing('moving')
        }
      }
    )
  if (can('comment:delete'))
    items.push({ key: 'delete', label: 'Delete', icon: 'bin', grave: true, onChoose: () => hands.onRemove(comment) })

  return (
    <article
      aria-label={label}
      aria-posinset={props.index}
      aria-setsize={props.count}
      aria-current={isSelected || undefined}
      // A feed is read article by article (APG feed).
      // oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex
      tabIndex={0}
      data-comment={comment.id}
      className={cx(
        'grid grid-cols-[1.25rem_minmax(0,1fr)] gap-x-2.5 border-b border-rule py-3 -outline-offset-2 [contain-intrinsic-block-size:auto_8rem] [content-visibility:auto]',
        isSelected && 'bg-wash'
      )}
    >
      <Letter letter={letter} isOpen={comment.isOpen} />
      <div className="min-w-0">
        <div className="flex items-start justify-between gap-1">
          <button
            type="button"
            title="Go there and loop it"
            onClick={() => hands.onListen(comment)}
            className="min-h-6 min-w-0 rounded text-left text-sm text-pencil hover:text-ink hover:underline"
          >
            {place.full}
          </button>
          {items.length > 0 ? (
            <span className="-my-1.5 flex-none">
              <Menu icon="more" label={`More for comment ${letter}`} items={items} />
            </span>
          ) : null}
        </div>
        {doing === 'editing' ? (
          <EditForm
            comment={comment}
            onDone={(to) => {
              acts.edit(comment.id, to)
              setDoing('reading')
            }}
            onCancel={() => setDoing('reading')}
          />
        ) : (
          <p className="break-words whitespace-pre-wrap">{comment.text}</p>
        )}
        {doing === 'moving' ? (
          <MoveRow
            span={{ startSec: comment.startSec, endSec: comment.endSec }}
            selection={props.selection}
            nudged={hands.nudged}
            onMove={(span) => acts.move(comment.id, span)}
            onDone={() => setDoing('reading')}
          />
        ) : null}
        <SaidBy
          author={comment.author}
          called={called(comment.author)}
          at={comment.createdAt}
          sending={comment.sending}
          words={[
            comment.kind,
            ...(isSettled ? [comment.settledBy ? `settled by ${called(comment.settledBy)}` : 'settled'] : [])
          ]}
        >
          {can('comment:reply') && doing !== 'answering' ? (
            <SmallButton onClick={() => setDoing('answering')}>Answer</SmallButton>
          ) : null}
          {can('comment:settle') && opens(comment.kind) ? (
            <SmallButton onClick={() => acts.settle(comment.id, !comment.isOpen)}>
              {comment.isOpen ? 'Settle' : 'Open again'}
            </SmallButton>
          ) : null}
        </SaidBy>
        <Refused sending={comment.sending} acts={acts} />
        <Replies comment={comment} hands={hands}>
          {doing === 'answering' ? (
            <li className="border-l border-rule pl-3">
              <ReplyForm
                memberId={hands.memberId}
                commentId={comment.id}
                onReply={(text) => {
                  acts.reply(comment.id, text)
                  setDoing('reading')
                }}
                onCancel={() => setDoing('reading')}
              />
            </li>
          ) : null}
        </Replies>
      </div>
    </article>
  )
})

/** The letter with the hooked underline that also stands under the waveform. */
const Letter = ({ letter, isOpen }: { letter: string; isOpen: boolean }) => (
  <span aria-hidden="true" className={cx('relative h-6', isOpen ? 'text-claim' : 'text-pencil')}>
    <span className="block h-5 text-center leading-5 font-semibold">{letter}</span>
    <span className="absolute top-[17px] left-0 h-1.5 border-l-2 border-current" />
    <span className={cx('absolute top-[21px] right-0 left-0 border-t-2 border-current', !isOpen && 'border-dashed')} />
  </span>
)

function Replies(props: { comment: ShownComment; hands: CommentHands; children: ReactNode }) {
  const { comment, hands, children } = props
  if (comment.replies.length === 0 && !children) return null
  return (
    <ol aria-label="Answers" className="mt-2.5 grid gap-3">
      {comment.replies.map((reply) => (
        <ReplyItem
          key={reply.id}
          reply={reply}
          acts={hands.acts}
          called={hands.names.get(reply.author.id) ?? reply.author.name}
          onRemove={(replyId) => hands.onRemoveReply(comment.id, replyId)}
        />
      ))}
      {children}
    </ol>
  )
}

function EditForm(props: {
  comment: ShownComment
  onDone: (to: { kind: CommentKind; text: string }) => void
  onCancel: () => void
}) {
  const [text, setText] = useState(props.comment.text)
  const [kind, setKind] = useState(props.comment.kind)
  return (
    <WordsForm
      label="Your words"
      labelHidden
      does="Keep it"
      isFocused
      text={text}
      maxLength={limits.commentText}
      rows={3}
      onText={setText}
      onCancel={props.onCancel}
      onDone={() => props.onDone({ kind, text: text.trim() })}
    >
      <KindChoice value={kind} onChange={setKind} />
    </WordsForm>
  )
}
