import { Link, useNavigate } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import { paths } from '@client/lib/paths'
import { Initials } from '@client/ui/initials'
import { Menu } from '@client/ui/menu'
import { useMe } from './api'
import { useAskingSignOut } from './use-sign-out'

/** At the right of the bar on every page: who is signed in, with the ways to the account, to help and out. */
export function AccountMenu() {
  const { data: me, error, isFetched } = useMe()
  if (me && !error) return <MenuOf me={me} />
  if (!isFetched || (error && error.code !== 'sign-in-needed')) return null
  return (
    <>
      <Link to={paths.help()} className="inline-flex min-h-9 items-center">
        Help
      </Link>
      <Link to={paths.signIn()} className="inline-flex min-h-9 items-center">
        Sign in
      </Link>
    </>
  )
}

function MenuOf({ me }: { me: Me }) {
  const navigate = useNavigate()
  const signOut = useAskingSignOut(me.id)
  return (
    <>
      <Menu
        label={`Your account, ${me.name}`}
        face={<Initials id={me.id} name={me.name} decorative />}
        items={[
          { key: 'account', label: 'Account', onChoose: () => void navigate(paths.account()) },
          { key: 'help', label: 'Help', onChoose: () => void navigate(paths.help()) },
          { key: 'out', label: 'Sign out', onChoose: signOut.start }
        ]}
      />
      {signOut.question}
    </>
  )
}
