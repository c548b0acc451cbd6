// Keys that are offered; any other can be typed.
import { keyOf, keyText } from '@shared/music/key'
import { noteAtFifths } from '@shared/music/pitch'

/** By the number of signs, fewest first: C, F, G, B♭, D … */
const byFifths = [0, -1, 1, -2, 2, -3, 3, -4, 4, -5, 5, -6, 6]

export const suggestedKeys: readonly string[] = byFifths.flatMap((fifths) => [
  keyText(keyOf(noteAtFifths(fifths), 'major')),
  // The relative minor lies three fifths up.
  keyText(keyOf(noteAtFifths(fifths + 3), 'minor'))
])

export const suggestedMeters: readonly string[] = ['4/4', '3/4', '2/2', '6/8', '12/8', '5/4', '7/4', '2/4', '9/8']
