// From the many hands musicians write in to one that the parser package knows. Every rule here is about a habit of
// writing (a sign, a word, an order), never about one symbol. Strings are short (chord.ts caps them), patterns are linear.
import { readNoteName, type NoteName } from '@shared/music/pitch'

/** A symbol cut into its three parts. `descriptor` as typed, `normal` as the parser package wants it. */
export interface CutSymbol {
  root: NoteName
  descriptor: string
  normal: string
  bass: NoteName | null
}

const SIGNS: [RegExp, string][] = [
  [/[♭]/gu, 'b'],
  [/[♯]/gu, '#'],
  [/♮/gu, ''],
  [/𝄫/gu, 'bb'],
  [/𝄪/gu, '##'],
  [/[−–—‐‑‒﹣]/gu, '-'],
  [/[∆△▲▵Δ]/gu, 'Δ'],
  [/[∅⌀⦰Ø]/gu, 'ø'],
  [/[º˚∘◦○⚬]/gu, '°'],
  [/[[{]/gu, '('],
  [/[\]}]/gu, ')'],
  [/[;·•]/gu, ','],
  [/[⁄∕\\]/gu, '/'],
  [/\s+/gu, ' ']
]

/** One sign for each meaning, single blanks, no brackets around the whole. */
export function plainSigns(text: string): string {
  // NFKC folds raised digits and full-width letters; º would become the letter o, so it is settled first.
  const folded = text.replace(/º/gu, '°').normalize('NFKC')
  const plain = SIGNS.reduce((rest, [sign, meaning]) => rest.replace(sign, meaning), folded).trim()
  const inside = /^\(([^()]*(?:\([^()]*\)[^()]*)*)\)$/u.exec(plain)?.[1]
  return inside === undefined ? plain : inside.trim()
}

/** Ways to write that nobody plays chords here. */
export const isNoChordText = (plain: string): boolean =>
  /^(n\.? ?\/?c\.?|n|no ?-?chords?|tacet)$/iu.test(plain) && plain !== 'n'

const ROOT = /^([A-Ga-g](?:[ -]?(?:flat|sharp)(?![a-z])|##|bb(?!5)|#|b|))(.*)$/iu
const BASS = /^(.*)\/ ?([A-G](?:[ -]?(?:flat|sharp)|##|bb|#|b|))$/iu

/** Cuts a symbol in plain signs into root, descriptor and bass; undefined when no root stands in front. */
export function cutSymbol(plain: string): CutSymbol | undefined {
  const match = ROOT.exec(plain)
  const root = readNoteName(match?.[1] ?? '')
  if (!match || !root) return undefined
  const rest = match[2] ?? ''
  // A small letter is a root only with a quality behind it (`dm7`, `bb7`): alone, or as `b9` and `do`, it is something else.
  if (/^[a-g]/u.test(plain) && !/^(m|M|-|maj|7|9|11|13|6|sus|dim|aug|ø|°|Δ|\^|\+|alt)/u.test(rest)) return undefined
  if (/^b\d/u.test(plain)) return undefined
  const slash = BASS.exec(rest)
  const bass = slash ? (readNoteName(slash[2] ?? '') ?? null) : null
  const descriptor = (slash ? (slash[1] ?? '') : rest).trim()
  return { root, descriptor, normal: normalDescriptor(descriptor), bass }
}

// `7` or `6` with degrees behind it whose accidental stands after the figure: 79b = 7♭9, 7911# = 7 9 ♯11, 79b13b.
const DEGREES_AFTER = /(7|6)((?:(?:9|11|13)[b#]?)+)$/u

function accidentalsInFront(descriptor: string): string {
  const match = DEGREES_AFTER.exec(descriptor)
  if (!match) return descriptor
  const [whole, base = '', degrees = ''] = match
  const after = /[b#]$/u.test(degrees) || (base === '7' && /^9(b|#)13$/u.test(degrees))
  if (!after) return descriptor
  const turned = degrees.replace(/(9|11|13)([b#]?)/gu, '$2$1')
  return descriptor.slice(0, -whole.length) + base + turned
}

// A plus or minus in front of a figure is an alteration once something that holds a figure, a bracket or a minor sign
// came before it; in front of everything it is the augmented or minor chord (`+9`, `-9`).
function signedDegrees(descriptor: string): string {
  return descriptor.replace(/([+-]) ?(4|5|6|9|11|13)(?!\d)/gu, (whole, sign: string, degree: string, at: number) => {
    const before = descriptor.slice(0, at)
    const altered = degree === '5' || /[\d(,/Δ^ømM-]|min?|maj?|sus|dim|aug|°|\+/u.test(before)
    return altered ? (sign === '+' ? '#' : 'b') + degree : whole
  })
}

/** The descriptor as the parser package reads it. */
export function normalDescriptor(typed: string): string {
  let text = typed.replace(/[A-LN-Z]/gu, (letter) => letter.toLowerCase()).replace(/([a-zM])\./gu, '$1')
  text = text
    .replace(/half ?-?dim(?:inished)?|hdim|%/gu, 'ø')
    .replace(/(\d)(?:st|nd|rd|th)(?![a-z])/gu, '$1')
    .replace(/flat ?/gu, 'b')
    .replace(/sharp ?/gu, '#')
    .replace(/susp(?!e)/gu, 'sus')
    .replace(/(?:doM|dom)(?:inant)? ?(\d?)/gu, (_, figure: string) => figure || '7')
    .replace(/(^|[^a])j(?!or) ?(\d?)/gu, (_, before: string, figure: string) => `${before}M${figure || '7'}`)
    .replace(/(ø|h)(?=maj|M)/gu, '$1 ')
  text = accidentalsInFront(text.replace(/ /gu, ''))
  text = signedDegrees(text)
  return (
    text
      // Over a triad a slash and a figure add that degree alone (C/9); over a seventh they only part the figures (7/9).
      .replace(/^(m|mi|min|minor|-|)\/(?=(?:9|2|11|4)(?!\d))/gu, '$1add')
      // A ninth over a diminished chord keeps the diminished seventh; the package would make the seventh minor.
      .replace(/^(dim|diminished|°|o|0)(?=(?:9|11)(?!\d))/gu, '$17add')
      // The bare power figure silences all that follows in the package: what is meant is a chord without third.
      .replace(/^5(?=[^/])/u, 'no3')
      .replace(/(?<!\d)6\((?:add)?9\)/gu, '69')
      .replace(/#7|(?<=m|i|n|-|r|dim|°|\()\+7/gu, 'M7')
      .replace(/(?<![b#])b7(?!\d)/gu, '7')
      .replace(/(?<=m|mi|min|minor|^-)4/gu, 'add4')
      .replace(/(?:add)?([b#])2(?!\d)/gu, '$19')
      .replace(/(?:add)?#4(?!\d)/gu, '#11')
      .replace(/b10(?!\d)/gu, '#9')
      // Commas outside brackets only part; inside they carry `add` and `no` on to the next degree.
      .replace(/,(?![^(]*\))/gu, '')
      // Slashes that are left part figures or words (6/9, 7/13, m/maj7).
      .replace(/\/(?=[b#+(-]?\d|M|m|add|sus|no|alt)/gu, '')
  )
}
