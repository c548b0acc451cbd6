// How a take is heard, in words.
import type { Aids, Channel } from '@shared/audio/listening'

/** "2 semitones up", "1 semitone down", "as played". */
export const semitoneWords = (semitones: number): string => {
  if (semitones === 0) return 'as played'
  const count = Math.abs(semitones)
  return `${count} ${count === 1 ? 'semitone' : 'semitones'} ${semitones > 0 ? 'up' : 'down'}`
}

/** "12 cents sharp", "as tuned". */
export const centWords = (cents: number): string => {
  if (cents === 0) return 'as tuned'
  const count = Math.abs(cents)
  return `${count} ${count === 1 ? 'cent' : 'cents'} ${cents > 0 ? 'sharp' : 'flat'}`
}

/** "The take is 18 cents low". */
export const tuningWords = (cents: number): string => {
  const count = Math.abs(cents)
  return `The take is ${count} ${count === 1 ? 'cent' : 'cents'} ${cents > 0 ? 'high' : 'low'}`
}

export const channelWords: Record<Channel, string> = {
  both: 'both sides',
  left: 'left side',
  right: 'right side',
  middle: 'the middle',
  sides: 'the sides without the middle'
}

/** All that is not as recorded: "an octave up · low focus to 300 Hz". Null when everything is. */
export const aidsWords = (aids: Aids, semitones: number): string | null => {
  const { isOctaveUp, lowFocus } = aids
  return joined([
    isOctaveUp ? 'an octave up' : null,
    ...pitchWords(aids, semitones),
    lowFocus.isOn ? `low focus ${topWords(aids)}` : null,
    sideWords(aids)
  ])
}

/** The same where the switches for the octave and for low focus stand beside it: "to 300 Hz · left side". */
export const besideSwitches = (aids: Aids, semitones: number): string | null =>
  joined([aids.lowFocus.isOn ? topWords(aids) : null, ...pitchWords(aids, semitones), sideWords(aids)])

const topWords = ({ lowFocus }: Aids): string => `to ${Math.round(lowFocus.topHz)} Hz`
const sideWords = ({ channel }: Aids): string | null => (channel === 'both' ? null : channelWords[channel])
const pitchWords = ({ cents }: Aids, semitones: number): (string | null)[] => [
  semitones === 0 ? null : semitoneWords(semitones),
  cents === 0 ? null : centWords(cents)
]
const joined = (parts: (string | null)[]): string | null => parts.filter((part) => part !== null).join(' · ') || null
