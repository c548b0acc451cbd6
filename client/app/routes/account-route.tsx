import { Link } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMe } from '@client/features/account/api'
import { NameForm } from '@client/features/account/name-form'
import { PasswordForm } from '@client/features/account/password-form'
import { TapLag } from '@client/features/account/tap-lag'
import { ThemeChoice } from '@client/features/account/theme-choice'
import { useAskingSignOut } from '@client/features/account/use-sign-out'
import { roleWords } from '@client/features/groups/role-words'
import { StartGroup } from '@client/features/groups/start-group'
import { ChordStyleChoice } from '@client/features/tunes/chord-style-choice'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Page, PageSection } from '@client/ui/page'

export function AccountRoute() {
  const { data: me } = useMe()
  return (
    <AppShell crumbs={[{ label: 'Account' }]} right={<AccountMenu />}>
      {me ? <Account key={me.id} me={me} /> : null}
    </AppShell>
  )
}

function Account({ me }: { me: Me }) {
  const signOut = useAskingSignOut(me.id)
  return (
    <Page
      title="Account"
      lead={`You are signed in with ${me.email}.`}
      actions={
        <Button busy={signOut.isPending} onClick={signOut.start}>
          Sign out
        </Button>
      }
    >
      {signOut.question}
      <PageSection title="Name">
        <div className="max-w-md">
          <NameForm me={me} />
        </div>
      </PageSection>
      <PageSection title="Groups" aside={<StartGroup />}>
        <Memberships me={me} />
      </PageSection>
      <PageSection title="Look" aside={<ChordStyleChoice />}>
        <ThemeChoice />
      </PageSection>
      <PageSection title="Tap lag">
        <TapLag me={me} />
      </PageSection>
      <PageSection title="Password">
        <div className="max-w-md">
          <PasswordForm me={me} />
        </div>
      </PageSection>
    </Page>
  )
}

function Memberships({ me }: { me: Me }) {
  if (me.memberships.length === 0) {
    return (
      <Empty
        says="The groups you play and study in stand here."
        how="Open an invitation link somebody sent you, or start a group of your own."
      />
    )
  }
  return (
    <ul className="grid">
      {me.memberships.map(({ groupId, groupName, role }) => (
        <li key={groupId} className="flex flex-wrap items-baseline gap-x-4 border-b border-rule py-1.5">
          <Link to={paths.group(groupId)} className="inline-flex min-h-6 min-w-0 items-center break-words">
            {groupName}
          </Link>
          <span className="text-pencil">{roleWords[role]}</span>
        </li>
      ))}
    </ul>
  )
}
