import { Link, Navigate, useLocation, useNavigate, useSearchParams } from 'react-router-dom'
import { useMe } from '@client/features/account/api'
import { ownPath } from '@client/features/account/own-path'
import { SignInForm } from '@client/features/account/sign-in-form'
import { paths, routes } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

/** What somebody typed into another form on the way here. */
const emailIn = (state: unknown): string =>
  typeof state === 'object' && state && 'email' in state && typeof state.email === 'string' ? state.email : ''

export function SignInRoute() {
  const me = useMe()
  const navigate = useNavigate()
  const { hash, state } = useLocation()
  const [query] = useSearchParams()
  const next = ownPath(query.get('next'))
  const isInvited = next === routes.invitation
  // An invitation's token comes along behind #, where no server and no log sees it.
  const goal = isInvited ? next + hash : next
  if (me.data && !me.error) return <Navigate to={goal} replace />
  return (
    <AppShell>
      <Page
        title="Sign in"
        width="narrow"
        lead={
          isInvited ? 'Then you come back to your invitation.' : next === '/' ? null : 'Then you go on where you were.'
        }
      >
        <SignInForm email={emailIn(state)} onIn={() => void navigate(goal, { replace: true })} />
        <p>
          No account yet?{' '}
          {isInvited ? (
            <Link to={paths.invitation(hash.slice(1))}>Back to the invitation</Link>
          ) : (
            <Link to={paths.signUp()}>Open an account</Link>
          )}
        </p>
      </Page>
    </AppShell>
  )
}
