// Which screen stands at which address. Screens come in files of their own, so that the first one is light.
import { createBrowserRouter, type RouteObject } from 'react-router-dom'
import { Frame } from '@client/app/frame'
import { Opening } from '@client/app/opening'
import { RouteFault } from '@client/app/route-fault'
import { SignedIn } from '@client/app/signed-in'
import { routes } from '@client/lib/paths'

const screens: RouteObject[] = [
  { path: routes.home, lazy: async () => ({ Component: (await import('@client/app/routes/home-route')).HomeRoute }) },
  {
    path: routes.signIn,
    lazy: async () => ({ Component: (await import('@client/app/routes/sign-in-route')).SignInRoute })
  },
  {
    path: routes.signUp,
    lazy: async () => ({ Component: (await import('@client/app/routes/sign-up-route')).SignUpRoute })
  },
  {
    path: routes.invitation,
    lazy: async () => ({ Component: (await import('@client/app/routes/invitation-route')).InvitationRoute })
  },
  { path: routes.help, lazy: async () => ({ Component: (await import('@client/app/routes/help-route')).HelpRoute }) },
  {
    element: <SignedIn />,
    children: [
      {
        path: routes.account,
        lazy: async () => ({ Component: (await import('@client/app/routes/account-route')).AccountRoute })
      },
      {
        path: routes.group,
        lazy: async () => ({ Component: (await import('@client/app/routes/group-route')).GroupRoute })
      },
      {
        path: routes.people,
        lazy: async () => ({ Component: (await import('@client/app/routes/people-route')).PeopleRoute })
      },
      {
        path: routes.tune,
        lazy: async () => ({ Component: (await import('@client/app/routes/tune-route')).TuneRoute })
      },
      {
        path: routes.take,
        lazy: async () => ({ Component: (await import('@client/app/routes/desk-route')).DeskRoute })
      }
    ]
  },
  ...(import.meta.env.DEV
    ? [{ path: routes.kit, lazy: async () => ({ Component: (await import('@client/app/routes/kit-route')).KitRoute }) }]
    : []),
  { path: '*', lazy: async () => ({ Component: (await import('@client/app/routes/nowhere-route')).NowhereRoute }) }
]

export const createRouter = () =>
  createBrowserRouter([
    { element: <Frame />, errorElement: <RouteFault />, hydrateFallbackElement: <Opening />, children: screens }
  ])
