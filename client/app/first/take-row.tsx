// A recording that has arrived: how far it is read, live, and the way to its desk.
import { Link } from 'react-router-dom'
import { useTake, useTakeProgress } from '@client/features/takes/api'
import { ReadingState } from '@client/features/takes/reading-state'
import { paths } from '@client/lib/paths'
import { Button, buttonClass } from '@client/ui/button'

export function TakeRow({ takeId, onDone }: { takeId: string; onDone: () => void }) {
  const { data: take } = useTake(takeId)
  useTakeProgress(takeId)
  if (!take) return <p role="status">It has arrived …</p>
  return (
    <>
      <p className="font-semibold break-words">{take.title}</p>
      {take.state === 'ready' ? (
        <div className="flex flex-wrap items-center gap-2">
          <Link to={paths.take(takeId)} className={buttonClass()} onClick={onDone}>
            Open it<span className="sr-only">, {take.title}</span>
          </Link>
          <Button look="quiet" onClick={onDone}>
            Take it off the list
          </Button>
        </div>
      ) : (
        <ReadingState take={take} onRemoved={onDone} />
      )}
    </>
  )
}
