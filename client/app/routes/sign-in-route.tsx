import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function SignInRoute() {
  return (
    <AppShell>
      <Page title="sign-in">{null}</Page>
    </AppShell>
  )
}
