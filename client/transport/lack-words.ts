import type { PlayerCapabilities } from './player'

/** What the sound cannot do here: "Here there is no pitch, no low focus, no click." Null where it can do everything. */
export const lackWords = ({ pitch, aids, clicks }: PlayerCapabilities): string | null => {
  const lacks = [
    pitch ? null : 'no other pitch',
    aids ? null : 'no octave up and no low focus',
    clicks ? null : 'no click and no rest between passes'
  ].filter((part) => part !== null)
  return lacks.length > 0 ? `In this browser there is ${lacks.join(', ')}.` : null
}
