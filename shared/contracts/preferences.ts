import { defineRoute } from '@shared/contracts/route'
import { PreferenceChange, Preferences } from '@shared/practice/preferences'

export const preferenceRoutes = {
  get: defineRoute({
    method: 'GET',
    path: '/api/me/preferences',
    access: 'account:own',
    summary: 'What the person signed in likes: keys, click, count-in, volume',
    response: Preferences
  }),
  change: defineRoute({
    method: 'PATCH',
    path: '/api/me/preferences',
    access: 'account:own',
    summary: 'Change some of it; null goes back to the default',
    body: PreferenceChange,
    response: Preferences
  })
}
