// How a chord is set: the one list of pieces that both the page and the canvas draw.
import type { TypesetChord } from '@shared/music/chord-typeset'

export interface ChordRun {
  text: string
  face: 'text' | 'signs'
  /** Size and height above the line, in root sizes. */
  scale: number
  rise: number
  weight: 400 | 600
  /** Air in front, in root sizes. */
  gap: number
}

// SMuFL csymMajorSeventh; the shipped face carries the other signs under their plain Unicode places.
const triangle = '\uE873'

const signs = /[♭♯♮𝄫𝄪°ø△\uE873]/u

/** Cuts text into stretches that `kind` tells apart, in order. */
function stretches<K>(text: string, kind: (char: string) => K): { text: string; kind: K }[] {
  const cut: { text: string; kind: K }[] = []
  for (const char of text) {
    const here = kind(char)
    const last = cut.at(-1)
    if (last && last.kind === here) last.text += char
    else cut.push({ text: char, kind: here })
  }
  return cut
}

type Setting = Pick<ChordRun, 'scale' | 'rise' | 'weight' | 'gap'>

const asRoot: Setting = { scale: 1, rise: 0, weight: 600, gap: 0 }
const asQuality: Setting = { scale: 0.78, rise: 0, weight: 600, gap: 0.03 }
const asRaised: Setting = { scale: 0.66, rise: 0.36, weight: 600, gap: 0.04 }
const asNextRaised: Setting = { ...asRaised, gap: 0.1 }
const asSlash: Setting = { scale: 0.9, rise: -0.06, weight: 400, gap: 0.06 }
const asBass: Setting = { scale: 0.82, rise: -0.06, weight: 600, gap: 0.02 }

const set = (text: string, setting: Setting): ChordRun[] =>
  stretches(text, (char) => signs.test(char)).map((piece, index) => ({
    ...setting,
    text: piece.text,
    face: piece.kind ? 'signs' : 'text',
    gap: index === 0 ? setting.gap : 0.02
  }))

// Of the quality the letters and signs stand on the line and the figures are raised: m⁷, maj⁷, ⁶⸍⁹.
const setQuality = (text: string): ChordRun[] =>
  stretches(text, (char) => /[\d/]/u.test(char)).flatMap((piece) => set(piece.text, piece.kind ? asRaised : asQuality))

export function chordRuns(chord: TypesetChord): ChordRun[] {
  const quality = chord.quality.map((piece) => (piece.kind === 'triangle' ? triangle : piece.text)).join('')
  const qualityRuns = setQuality(quality)
  const hasFigure = qualityRuns.some(({ rise }) => rise > 0)
  return [
    ...set(chord.root + chord.accidental, asRoot),
    ...qualityRuns,
    ...chord.raised.flatMap((text, index) => set(text, index === 0 && !hasFigure ? asRaised : asNextRaised)),
    ...(chord.bass ? [...set('/', asSlash), ...set(chord.bass.letter + chord.bass.accidental, asBass)] : [])
  ]
}
