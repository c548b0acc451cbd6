// What every screen stands in: notices, the spoken log, and what is said when the sign-in ends elsewhere.
import { useQueryClient } from '@tanstack/react-query'
import { Outlet } from 'react-router-dom'
import { meKey } from '@client/features/account/api'
import { UploadsProvider } from '@client/features/uploads/provider'
import { useScope } from '@client/lib/scope'
import { closeSocket, roomSocket } from '@client/lib/socket'
import { LiveLog } from '@client/ui/live-log'
import { Toasts } from '@client/ui/toasts'

export function Frame() {
  const client = useQueryClient()
  useScope(
    (scope) => {
      const socket = roomSocket()
      const handleEnded = (): void => {
        closeSocket()
        void client.invalidateQueries({ queryKey: meKey })
      }
      socket.on('signIn:ended', handleEnded)
      scope.add(() => socket.off('signIn:ended', handleEnded))
    },
    [client]
  )
  return (
    <LiveLog>
      <Toasts>
        <UploadsProvider>
          <Outlet />
        </UploadsProvider>
      </Toasts>
    </LiveLog>
  )
}
