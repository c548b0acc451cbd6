// Units as flavoured numbers: a plain number may be used as one, but one unit never passes for another.
declare const unit: unique symbol
type Flavour<Name extends string> = number & { readonly [unit]?: Name }

/** Seconds from the start of a take. */
export type Sec = Flavour<'sec'>
/** Length in beats of the meter's lower figure. */
export type Beats = Flavour<'beats'>
/** Bars counted through the take: first full bar 1, pick-up 0 or less. */
export type BarIndex = Flavour<'bar'>
/** MIDI note number, 60 = middle C. */
export type Midi = Flavour<'midi'>
/** 0-11, C = 0. */
export type PitchClass = Flavour<'pitchClass'>
