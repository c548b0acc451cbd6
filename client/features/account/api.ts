import { useQueryClient } from '@tanstack/react-query'
import { accountRoutes, type Me } from '@shared/contracts/account'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'
import { closeSocket } from '@client/lib/socket'

export const meKey = routeKey(accountRoutes.me, {})

export const useMe = () => useRouteQuery(accountRoutes.me, {}, { staleTime: 5 * 60_000 })

/** Signing in or up starts from an empty cache: what another person saw here is not for this one. */
const useEntrance = () => {
  const client = useQueryClient()
  return (me: Me): void => {
    client.clear()
    closeSocket()
    client.setQueryData(meKey, me)
  }
}
export const useSignIn = () => {
  const enter = useEntrance()
  return useRouteMutation(accountRoutes.signIn, { onSuccess: enter, retry: false })
}
export const useSignUp = () => {
  const enter = useEntrance()
  return useRouteMutation(accountRoutes.signUp, { onSuccess: enter, retry: false })
}
export const useSignOut = () => {
  const client = useQueryClient()
  return useRouteMutation(accountRoutes.signOut, {
    onSuccess: () => {
      closeSocket()
      client.clear()
    }
  })
}
export const useUpdateMe = () => {
  const client = useQueryClient()
  return useRouteMutation(accountRoutes.update, { onSuccess: (me) => client.setQueryData(meKey, me) })
}
export const useChangePassword = () => useRouteMutation(accountRoutes.password, { retry: false })
