import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

export function PeopleRoute() {
  return (
    <AppShell>
      <Page title="people">{null}</Page>
    </AppShell>
  )
}
