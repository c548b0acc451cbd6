import { type ReactNode, useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { outbox } from '@client/lib/outbox'
import { paths } from '@client/lib/paths'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { useToast } from '@client/ui/toasts'
import { useSignOut } from './api'

/** Signs out, after asking when something written here has not reached the server. Render `question` where the button is. */
export const useAskingSignOut = (memberId: string): { start: () => void; isPending: boolean; question: ReactNode } => {
  const signOut = useSignOut()
  const navigate = useNavigate()
  const toast = useToast()
  const [unsent, setUnsent] = useState(0)

  const leave = (): void =>
    signOut.mutate(
      {},
      {
        onSuccess: () => void navigate(paths.home(), { replace: true }),
        onError: () => toast({ text: 'You are still signed in: the server could not be reached.' })
      }
    )
  const start = (): void =>
    void outbox.count(memberId).then((count) => {
      if (count > 0) setUnsent(count)
      else leave()
    })
  const question =
    unsent > 0 ? (
      <Dialog
        title="Sign out with unsent work?"
        onClose={() => setUnsent(0)}
        actions={
          <>
            <Button onClick={() => setUnsent(0)}>Stay signed in</Button>
            <Button busy={signOut.isPending} onClick={leave}>
              Sign out all the same
            </Button>
          </>
        }
      >
        <p>
          {unsent === 1 ? 'One thing you wrote here has' : `${unsent} things you wrote here have`} not reached the
          server yet. {unsent === 1 ? 'It stays' : 'They stay'} in this browser, for you only, and{' '}
          {unsent === 1 ? 'goes' : 'go'} out when you sign in here again and open the same take or tune.
        </p>
      </Dialog>
    ) : null
  return { start, isPending: signOut.isPending, question }
}
