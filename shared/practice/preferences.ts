// What one person likes, kept with their account and the same in every browser they sign in with.
import { z } from 'zod'
import { lowFocusLimits, plainAids } from '@shared/audio/listening'
import { limits } from '@shared/limits'
import { ClickGrid } from '@shared/practice/click-pattern'
import type { CountInChoice } from '@shared/practice/count-in'
import { keyActions } from '@shared/practice/key-actions'

/** A key as key maps write it: `Space`, `l`, `Shift+ArrowLeft`, `Mod+z`. */
export const KeyName = z
  .string()
  .max(limits.keyName)
  .regex(/^(Mod\+)?(Alt\+)?(Shift\+)?[^\s\p{C}]+$/u)
/** Only the actions whose keys differ from those they come with; an empty list is an action without keys. */
export const KeyChoices = z.partialRecord(z.enum(keyActions), z.array(KeyName).max(limits.keysPerAction))
export type KeyChoices = z.infer<typeof KeyChoices>

/** Where clicks are laid (shared/practice/click-pattern.ts), whether they are heard, and how loud (0 to 1). */
export const ClickSettings = ClickGrid.extend({ isOn: z.boolean(), level: z.number().min(0).max(1) })
export type ClickSettings = z.infer<typeof ClickSettings>

const countIns: readonly CountInChoice[] = ['none', 'one bar', 'two bars']

/** The whole document: a key that is not there stands at its default. Unknown keys are refused. */
export const Preferences = z.strictObject({
  keys: KeyChoices.optional(),
  /** Single keys are switched off; those with Ctrl or Command stay. */
  areKeysOff: z.boolean().optional(),
  click: ClickSettings.optional(),
  countIn: z.enum(countIns).optional(),
  /** As last set, 0 to 1. */
  volume: z.number().min(0).max(1).optional(),
  lowFocusTopHz: z.number().min(lowFocusLimits.minHz).max(lowFocusLimits.maxHz).optional()
})
export type Preferences = z.infer<typeof Preferences>
export type PreferenceName = keyof Preferences

const shape = Preferences.shape
/** A change: a key with a value is kept as that whole value, a key with null goes back to its default, others stay. */
export const PreferenceChange = z.strictObject({
  keys: shape.keys.nullable(),
  areKeysOff: shape.areKeysOff.nullable(),
  click: shape.click.nullable(),
  countIn: shape.countIn.nullable(),
  volume: shape.volume.nullable(),
  lowFocusTopHz: shape.lowFocusTopHz.nullable()
})
export type PreferenceChange = z.infer<typeof PreferenceChange>

/** What holds where nothing was chosen. The volume is moderate on purpose: a first sound must not be a loud one. */
export const defaultPreferences: Required<Preferences> = {
  keys: {},
  areKeysOff: false,
  click: { isOn: false, pattern: 'every beat', subdivision: 1, silence: null, level: 0.5 },
  countIn: 'none',
  volume: 0.7,
  lowFocusTopHz: plainAids.lowFocus.topHz
}

/** What is kept, read key by key: what an older or newer version wrote and this one cannot read is left out. */
export const readPreferences = (stored: unknown): Preferences => {
  const read: Record<string, unknown> = {}
  for (const [name, schema] of Object.entries(shape)) {
    const value = schema.safeParse((stored as Record<string, unknown> | null | undefined)?.[name])
    if (value.success && value.data !== undefined) read[name] = value.data
  }
  return read as Preferences
}

/** The document after a change, as the server keeps it. */
export const changedPreferences = (before: Preferences, change: PreferenceChange): Preferences => {
  const kept = Object.entries({ ...before, ...change }).filter(([, value]) => value !== null && value !== undefined)
  return Object.fromEntries(kept) as Preferences
}
