import { useMemo } from 'react'
import { choicesOf, keyMapFrom, type KeyBinding } from '@client/transport/keys'
import { useChangePreferences, usePreferences } from './api'

export interface OwnKeys {
  map: readonly KeyBinding[]
  setMap: (map: readonly KeyBinding[]) => void
  /** Single keys are switched off. */
  areOff: boolean
  setAreOff: (areOff: boolean) => void
}

/** The keys of whoever is signed in: what useTransportKeys listens to and what the key sheet shows and changes. */
export const useOwnKeys = (): OwnKeys => {
  const { preferences } = usePreferences()
  const change = useChangePreferences()
  const map = useMemo(() => keyMapFrom(preferences.keys), [preferences.keys])
  return {
    map,
    areOff: preferences.areKeysOff,
    setMap: (next) => {
      const keys = choicesOf(next)
      change({ keys: Object.keys(keys).length > 0 ? keys : null })
    },
    setAreOff: (areOff) => change({ areKeysOff: areOff || null })
  }
}
