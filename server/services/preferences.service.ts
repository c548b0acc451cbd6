import type { PreferenceChange, Preferences } from '@shared/practice/preferences'
import type { Actor } from '@server/http/handlers'
import type { PreferencesRepo } from '@server/repositories/preferences.repo'

export const createPreferenceService = ({ preferences }: { preferences: PreferencesRepo }) => ({
  of: (actor: Actor): Promise<Preferences> => preferences.of(actor.id),
  change: (actor: Actor, change: PreferenceChange): Promise<Preferences> => preferences.change(actor.id, change)
})
export type PreferenceService = ReturnType<typeof createPreferenceService>
