import type { preferenceRoutes } from '@shared/contracts/preferences'
import type { Handlers } from '@server/http/handlers'
import type { PreferenceService } from '@server/services/preferences.service'

export const preferenceHandlers = (preferences: PreferenceService): Handlers<typeof preferenceRoutes> => ({
  get: ({ actor }) => preferences.of(actor),
  change: ({ actor, body }) => preferences.change(actor, body)
})
