import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page } from '@client/ui/page'

/** The last resort: a screen that broke, or files of an older build that are gone after an update. */
export function RouteFault() {
  return (
    <AppShell>
      <Page title="This screen broke" width="narrow">
        <Notice kind="fault" next={<Button onClick={() => window.location.reload()}>Load it again</Button>}>
          Something went wrong while showing this screen. What you had saved is safe.
        </Notice>
      </Page>
    </AppShell>
  )
}
