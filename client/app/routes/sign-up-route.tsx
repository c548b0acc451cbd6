import { Link, Navigate, useNavigate } from 'react-router-dom'
import { useMe } from '@client/features/account/api'
import { SignUpForm } from '@client/features/account/sign-up-form'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function SignUpRoute() {
  const me = useMe()
  const navigate = useNavigate()
  if (me.data && !me.error) return <Navigate to={paths.home()} replace />
  return (
    <AppShell>
      <Page
        title="Open an account"
        width="narrow"
        lead="Your recordings are private: only people you invite get in, and you choose who hears what."
      >
        <SignUpForm
          signInTo={paths.signIn()}
          submitLabel="Open the account"
          onIn={() => void navigate(paths.home(), { replace: true })}
        />
        <p>
          Have one already? <Link to={paths.signIn()}>Sign in</Link>. Invited by somebody? Open the link they sent you
          instead.
        </p>
      </Page>
    </AppShell>
  )
}
