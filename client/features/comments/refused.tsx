import type { Sending } from './changes'
import type { CommentActs } from './api'
import { SmallButton } from './small-button'

/** What the server did not take, with the words still there. */
export function Refused({ sending, acts }: { sending: Sending | undefined; acts: CommentActs }) {
  if (!sending?.refused) return null
  return (
    <p role="alert" className="mt-1 text-sm text-fault">
      <span aria-hidden="true">! </span>
      Not kept: {sending.refused} <SmallButton onClick={() => acts.tryAgain(sending.changeId)}>Try again</SmallButton>{' '}
      <SmallButton onClick={() => acts.takeBack(sending.changeId)}>Take it back</SmallButton>
    </p>
  )
}
