import { useState } from 'react'
import { QueryClientProvider } from '@tanstack/react-query'
import { RouterProvider } from 'react-router-dom'
import { createRouter } from '@client/app/router'
import { createQueryClient } from '@client/lib/query'

export function App() {
  const [client] = useState(createQueryClient)
  const [router] = useState(createRouter)
  return (
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  )
}
