import { Link } from 'react-router-dom'
import { AccountMenu } from '@client/features/account/account-menu'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { buttonClass } from '@client/ui/button'
import { Page } from '@client/ui/page'

export function NowhereRoute() {
  return (
    <AppShell right={<AccountMenu />}>
      <Page
        title="There is nothing here"
        width="narrow"
        lead="The address may be mistyped, or what stood here was deleted."
      >
        <p>
          <Link to={paths.home()} className={buttonClass()}>
            To the first screen
          </Link>
        </p>
      </Page>
    </AppShell>
  )
}
