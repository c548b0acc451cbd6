import type { Me } from '@shared/contracts/account'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { useToast } from '@client/ui/toasts'
import { useUpdateMe } from './api'

/** How far from the beat this person's taps land, once learned from bars they tapped and then corrected. */
export function TapLag({ me }: { me: Me }) {
  const update = useUpdateMe()
  const toast = useToast()
  const lag = me.tapLagMs
  if (lag === null) {
    return (
      <p>
        Nothing learned yet. When you tap bars along with a take, the room learns how early or late your taps fall and
        takes it out.
      </p>
    )
  }
  const early = lag < 0 ? 'early' : 'late'
  const forget = (): void =>
    update.mutate({ body: { tapLagMs: null } }, { onSuccess: () => toast({ text: 'Tap lag forgotten.' }) })
  return (
    <div className="grid justify-items-start gap-2">
      <p>
        Your taps fall about {Math.abs(Math.round(lag))} ms {early}. This is taken out when you tap bars along.
      </p>
      {update.error ? <Notice kind="fault">{update.error.message}</Notice> : null}
      <Button busy={update.isPending} onClick={forget}>
        Forget it
      </Button>
      <p className="text-sm text-pencil">Worth it after a change of headphones or machine.</p>
    </div>
  )
}
