import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function HomeRoute() {
  return (
    <AppShell>
      <Page title="home">{null}</Page>
    </AppShell>
  )
}
