import { Link } from 'react-router-dom'
import { paths } from '@client/lib/paths'
import { useTake } from './api'

/** The way to the take that this one was played over; nothing for those who may not hear that one. */
export function PlayedOver({ takeId }: { takeId: string }) {
  const take = useTake(takeId)
  if (!take.data) return null
  return (
    <span className="text-sm text-pencil">
      Played over{' '}
      <Link to={paths.take(takeId)} className="text-ink">
        {take.data.title}
      </Link>
    </span>
  )
}
