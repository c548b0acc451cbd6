import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { config } from 'zod'
import { App } from '@client/app/app'
import { applyStoredTheme } from '@client/ui/theme'

// Zod would try whether it may make functions from text, and the content security policy would report it.
config({ jitless: true })
applyStoredTheme()

const root = document.getElementById('root')
if (root) {
  createRoot(root).render(
    <StrictMode>
      <App />
    </StrictMode>
  )
}
