// How a take is listened to: what the engine, the server's clips and the interface mean by the same words.

/** Which part of a stereo picture is heard. `middle` is (L + R) / 2 on both sides, `sides` is (L - R) / 2 on both sides. */
export type Channel = 'both' | 'left' | 'right' | 'middle' | 'sides'

export interface LowFocus {
  isOn: boolean
  /** Everything above is taken away, steeply; hertz. */
  topHz: number
}

export interface Aids {
  lowFocus: LowFocus
  channel: Channel
  /** Sounds an octave higher, on top of the chosen semitones. */
  isOctaveUp: boolean
  /** Fine tune, -100 to 100. */
  cents: number
}

export const plainAids: Aids = {
  lowFocus: { isOn: false, topHz: 300 },
  channel: 'both',
  isOctaveUp: false,
  cents: 0
}

export const lowFocusLimits = { minHz: 80, maxHz: 1000 }
/** What the engine can shift by, in all: semitones, octave and cents together. */
export const pitchLimits = { minSemitones: -12, maxSemitones: 24, cents: 100 }

/** Semitones in all, kept within what the engine can. */
export const totalSemitones = (semitones: number, aids: Pick<Aids, 'isOctaveUp' | 'cents'>): number => {
  const cents = Math.max(-pitchLimits.cents, Math.min(pitchLimits.cents, aids.cents))
  const whole = semitones + (aids.isOctaveUp ? 12 : 0)
  return Math.max(pitchLimits.minSemitones, Math.min(pitchLimits.maxSemitones, whole)) + cents / 100
}
