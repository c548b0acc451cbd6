// Screens for people who are signed in; the others are asked to, and come back where they wanted to go.
import { Navigate, Outlet, useLocation } from 'react-router-dom'
import { Opening } from '@client/app/opening'
import { useMe } from '@client/features/account/api'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page } from '@client/ui/page'

export function SignedIn() {
  const me = useMe()
  const { pathname, search } = useLocation()
  if (me.data && !(me.error?.code === 'sign-in-needed')) return <Outlet />
  if (me.error?.code === 'sign-in-needed') return <Navigate to={paths.signIn(pathname + search)} replace />
  if (!me.error) return <Opening />
  return (
    <AppShell>
      <Page title="Not reachable" width="narrow">
        <Notice kind="fault" next={<Button onClick={() => void me.refetch()}>Try again</Button>}>
          {me.error.message}
        </Notice>
      </Page>
    </AppShell>
  )
}
