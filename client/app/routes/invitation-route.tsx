import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function InvitationRoute() {
  return (
    <AppShell>
      <Page title="invitation">{null}</Page>
    </AppShell>
  )
}
