import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function TuneRoute() {
  return (
    <AppShell>
      <Page title="tune">{null}</Page>
    </AppShell>
  )
}
