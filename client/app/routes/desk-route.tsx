import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function DeskRoute() {
  return (
    <AppShell>
      <Page title="desk">{null}</Page>
    </AppShell>
  )
}
