import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { App } from '@client/app/app'
import { applyStoredTheme } from '@client/ui/theme'

applyStoredTheme()

const root = document.getElementById('root')
if (root) {
  createRoot(root).render(
    <StrictMode>
      <App />
    </StrictMode>
  )
}
