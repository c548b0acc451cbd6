import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function NowhereRoute() {
  return (
    <AppShell>
      <Page title="nowhere">{null}</Page>
    </AppShell>
  )
}
