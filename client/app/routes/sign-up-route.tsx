import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function SignUpRoute() {
  return (
    <AppShell>
      <Page title="sign-up">{null}</Page>
    </AppShell>
  )
}
