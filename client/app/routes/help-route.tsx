import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function HelpRoute() {
  return (
    <AppShell>
      <Page title="help">{null}</Page>
    </AppShell>
  )
}
