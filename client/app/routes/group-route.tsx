import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function GroupRoute() {
  return (
    <AppShell>
      <Page title="group">{null}</Page>
    </AppShell>
  )
}
