import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function AccountRoute() {
  return (
    <AppShell>
      <Page title="account">{null}</Page>
    </AppShell>
  )
}
