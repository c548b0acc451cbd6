// How a chord is set: the one list of pieces that both the page and the canvas draw.

export type ChordAccidental = '' | '♭' | '♯' | '𝄫' | '𝄪'

export type ChordGlyph = 'triangle' | 'halfDiminished' | 'diminished' | 'minus'

export interface ChordParts {
  root: string
  accidental: ChordAccidental
  /** Stands on the line behind the root: m, maj, a triangle … */
  quality: readonly ({ text: string } | { glyph: ChordGlyph })[]
  /** Raised and smaller: 7, ♭9, sus4 … one string each. */
  raised: readonly string[]
  bass?: { root: string; accidental: ChordAccidental }
}

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

// Triangle: SMuFL "csymMajorSeventh", U+E873. The shipped face carries the others under their plain Unicode signs.
const glyphText: Record<ChordGlyph, string> = {
  triangle: '\uE873',
  halfDiminished: 'ø',
  diminished: '°',
  minus: '−'
}

const signs = /[♭♯♮𝄫𝄪°ø△\uE873]/u

/** Cuts text into stretches of letters and stretches of music signs, which come from another face. */
function stretches(text: string): { text: string; isSign: boolean }[] {
  const cut: { text: string; isSign: boolean }[] = []
  for (const char of text) {
    const isSign = signs.test(char)
    const last = cut.at(-1)
    if (last && last.isSign === isSign) last.text += char
    else cut.push({ text: char, isSign })
  }
  return cut
}

type Setting = Pick<ChordRun, 'scale' | 'rise' | 'weight' | 'gap'>

const asRoot: Setting = { scale: 1, rise: 0, weight: 600, gap: 0 }
const asQuality: Setting = { scale: 0.78, rise: 0, weight: 600, gap: 0.03 }
const asRaised: Setting = { scale: 0.66, rise: 0.36, weight: 600, gap: 0.03 }
const asNextRaised: Setting = { ...asRaised, gap: 0.1 }
const asSlash: Setting = { scale: 0.9, rise: -0.06, weight: 400, gap: 0.06 }
const asBass: Setting = { scale: 0.82, rise: -0.06, weight: 600, gap: 0.02 }

const set = (text: string, setting: Setting): ChordRun[] =>
  stretches(text).map(({ text: piece, isSign }, index) => ({
    ...setting,
    text: piece,
    face: isSign ? 'signs' : 'text',
    gap: index === 0 ? setting.gap : 0.02
  }))

export function chordRuns(parts: ChordParts): ChordRun[] {
  const bass = parts.bass ? [...set('/', asSlash), ...set(parts.bass.root + parts.bass.accidental, asBass)] : []
  return [
    ...set(parts.root + parts.accidental, asRoot),
    ...parts.quality.flatMap((piece) => set('glyph' in piece ? glyphText[piece.glyph] : piece.text, asQuality)),
    ...parts.raised.flatMap((text, index) => set(text, index === 0 ? asRaised : asNextRaised)),
    ...bass
  ]
}

const spokenSigns: [RegExp, string][] = [
  [/𝄫/gu, ' double flat '],
  [/𝄪/gu, ' double sharp '],
  [/♭/gu, ' flat '],
  [/♯/gu, ' sharp '],
  [/[△\uE873]/gu, ' major seven '],
  [/°/gu, ' diminished '],
  [/ø/gu, ' half diminished ']
]

const spokenWords: Record<string, string> = {
  m: 'minor',
  mi: 'minor',
  min: 'minor',
  '−': 'minor',
  '-': 'minor',
  maj: 'major',
  ma: 'major',
  M: 'major',
  dim: 'diminished',
  aug: 'augmented',
  '+': 'augmented',
  sus: 'suspended',
  alt: 'altered'
}

const spokenGlyphs: Record<ChordGlyph, string> = {
  triangle: 'major seven',
  halfDiminished: 'half diminished',
  diminished: 'diminished',
  minus: 'minor'
}

function spokenText(text: string): string {
  const worded = spokenSigns.reduce((rest, [sign, word]) => rest.replace(sign, word), text)
  return worded.replace(/[\p{L}+−-]+/gu, (word) => ` ${spokenWords[word] ?? word} `)
}

/** The chord as one says it: "B flat 7 sharp 11 over D". */
export function spokenChord(parts: ChordParts): string {
  const words = [
    // Letters stay as they are: A is a note here, not a word.
    parts.root,
    spokenText(parts.accidental),
    ...parts.quality.map((piece) => ('glyph' in piece ? spokenGlyphs[piece.glyph] : spokenText(piece.text))),
    ...parts.raised.map((text) => spokenText(text)),
    parts.bass ? `over ${parts.bass.root} ${spokenText(parts.bass.accidental)}` : ''
  ]
  return words.join(' ').replace(/[()]/gu, ' ').replace(/\s+/gu, ' ').trim()
}
