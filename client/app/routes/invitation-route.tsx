import { Link, useLocation, useNavigate } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMe } from '@client/features/account/api'
import { SignUpForm } from '@client/features/account/sign-up-form'
import { type Invited, InvitationGate } from '@client/features/groups/invitation-gate'
import { JoinButton } from '@client/features/groups/join-button'
import { paths, routes } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'

/** Where an invitation link leads. Its token stays behind #: it is sent in the body of requests and in no address. */
export function InvitationRoute() {
  const me = useMe()
  const token = useLocation().hash.slice(1)
  return (
    <AppShell right={<AccountMenu />}>
      <Page title="Invitation" width="narrow">
        <InvitationGate token={token}>
          {(invited) =>
            me.data && !me.error ? (
              <Joining invited={invited} token={token} me={me.data} />
            ) : me.isFetched ? (
              <Arriving token={token} />
            ) : null
          }
        </InvitationGate>
      </Page>
    </AppShell>
  )
}

function Joining({ invited, token, me }: { invited: Invited; token: string; me: Me }) {
  const navigate = useNavigate()
  return (
    <>
      <JoinButton
        role={invited.role}
        token={token}
        onJoined={({ id }) => void navigate(paths.group(id), { replace: true })}
      />
      <p className="text-pencil">
        You are signed in as {me.name} ({me.email}). If that is not you, sign out at the top right; the invitation stays
        here.
      </p>
    </>
  )
}

function Arriving({ token }: { token: string }) {
  const navigate = useNavigate()
  const signInTo = `${paths.signIn(routes.invitation)}#${token}`
  const handleIn = (me: Me): void => {
    const joined = me.memberships[0]
    void navigate(joined ? paths.group(joined.groupId) : paths.home(), { replace: true })
  }
  return (
    <>
      <p>
        Have an account here? <Link to={signInTo}>Sign in</Link> and you come back. If not, open one:
      </p>
      <SignUpForm invitation={token} signInTo={signInTo} submitLabel="Open an account and join" onIn={handleIn} />
    </>
  )
}
