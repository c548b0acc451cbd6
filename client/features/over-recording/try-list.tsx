import { timeWords } from '@shared/timing/time-words'
import { Button } from '@client/ui/button'
import { IconButton } from '@client/ui/icon-button'
import { RelativeTime } from '@client/ui/relative-time'
import type { ListedTry } from './use-tries'

export interface TryListProps {
  tries: readonly ListedTry[]
  /** What a try was played over: "bars 17-20 of B". */
  placeWords: (listed: ListedTry) => string
  /** Which one is heard. */
  heardId: string | null
  /** On their way to the server. */
  sending: ReadonlySet<string>
  areBusy: boolean
  onListen: (listed: ListedTry) => void
  onPause: () => void
  onKeep: (listed: ListedTry) => void
  onDrop: (listed: ListedTry) => void
}

export const tryName = ({ one }: ListedTry): string => `Try ${one.number}`

/** Everything that was played over the take and waits for a word. */
export function TryList({ tries, ...rest }: TryListProps) {
  return (
    <section aria-label="Your tries" className="grid gap-1">
      <h3 className="text-sm text-pencil">Your tries, in this browser until you keep them</h3>
      <ul className="grid">
        {tries.map((listed) => (
          <TryRow key={listed.one.id} listed={listed} {...rest} />
        ))}
      </ul>
    </section>
  )
}

function TryRow({
  listed,
  placeWords,
  heardId,
  sending,
  areBusy,
  ...on
}: Omit<TryListProps, 'tries'> & { listed: ListedTry }) {
  const { recorded, one } = listed
  const name = tryName(listed)
  const isHeard = heardId === one.id
  const isSending = sending.has(one.id)
  return (
    <li className="flex flex-wrap items-center gap-x-3 gap-y-1 border-t border-rule py-2 first:border-t-0">
      <IconButton
        icon={isHeard ? 'pause' : 'play'}
        look="plain"
        label={isHeard ? `Pause ${name.toLowerCase()}` : `Listen to ${name.toLowerCase()} with the take`}
        disabled={areBusy}
        onClick={() => (isHeard ? on.onPause() : on.onListen(listed))}
      />
      <div className="min-w-0 flex-1 basis-40">
        <span className="font-semibold">{name}</span>
        <span className="text-pencil"> · {placeWords(listed)}</span>
        <p className="text-sm text-pencil">
          {timeWords(one.cut.frames / recorded.sampleRate)} long
          {one.cut.rate < 0.995 || one.cut.rate > 1.005 ? `, at ${Math.round(one.cut.rate * 100)} %` : ''},{' '}
          <RelativeTime at={new Date(recorded.startedMs).toISOString()} />
        </p>
      </div>
      {isSending ? (
        <span role="status" className="text-sm text-pencil">
          On its way to the group
        </span>
      ) : (
        <div className="flex flex-wrap gap-1">
          <Button disabled={areBusy} onClick={() => on.onKeep(listed)}>
            Keep<span className="sr-only"> {name.toLowerCase()}</span>
          </Button>
          <Button look="quiet" icon="bin" disabled={areBusy} onClick={() => on.onDrop(listed)}>
            Throw away<span className="sr-only"> {name.toLowerCase()}</span>
          </Button>
        </div>
      )}
    </li>
  )
}
