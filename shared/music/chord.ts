// Reading chord symbols: our own rules for signs and habits (chord-notation.ts), then the package chord-symbol for what
// the descriptor means. Root and bass are read here; the package only ever sees a chord on C.
import { chordParserFactory } from 'chord-symbol/lib/chord-symbol-esm.js'
import { err, ok, type Result } from '@shared/result'
import type { PitchClass } from '@shared/units'
import { cutSymbol, isNoChordText, plainSigns } from '@shared/music/chord-notation'
import { noteText, pitchClassOf, type NoteName } from '@shared/music/pitch'

/**
 * What a chord is, coarsely. `sus`: a fourth or second instead of the third (an 11 chord counts, its third is left out).
 * `dominant`: major third and minor seventh, altered or not. `altered`: written with "alt". `augmented`: major third and
 * raised fifth without minor seventh. `diminished`: minor third and lowered fifth without minor seventh.
 * `power`: neither third nor suspension.
 */
export type ChordKind =
  'major' | 'minor' | 'dominant' | 'half-diminished' | 'diminished' | 'augmented' | 'sus' | 'power' | 'altered'

/** A degree of the chord as spelled over its root: `3`, `b3`, `#5`, `bb7`, `#11` … `4` is a suspended or added fourth. */
export type ChordDegree = string

/** A sounding chord. */
export interface SoundingChord {
  noChord?: false
  root: PitchClass
  /** `E♭`. */
  rootName: string
  bass: PitchClass | null
  bassName: string | null
  /** Pitch classes above the root, rising, 0 first. */
  pcs: number[]
  kind: ChordKind
  degrees: ChordDegree[]
  /** Written with "alt": the tensions are the player's choice. */
  altered: boolean
  /** Written with a second in place of the third. */
  suspendedSecond: boolean
  /** What was typed between root and bass. */
  descriptor: string
}

/** `N.C.`: nobody plays a chord. */
export interface NoChord {
  noChord: true
}

export type Chord = SoundingChord | NoChord

export interface ChordFault {
  message: string
}

/** Longest symbol that is looked at; the longest of real life has about thirty characters. */
export const MAX_CHORD_TEXT = 64

const parse = chordParserFactory({ notationSystems: ['english'] })

const SEMITONES: Record<ChordDegree, number> = {
  '1': 0,
  b9: 1,
  '2': 2,
  '9': 2,
  '#9': 3,
  b3: 3,
  '3': 4,
  '4': 5,
  '11': 5,
  b5: 6,
  '#11': 6,
  '5': 7,
  '#5': 8,
  b6: 8,
  b13: 8,
  bb7: 9,
  '6': 9,
  '13': 9,
  b7: 10,
  '7': 11
}

const WITH_ALT = new Set(['alt', 'seventh', 'b5', '#5', 'b9', '#9', '#11', 'b13'])

// Degrees that no hand means together and the package lets pass.
const CLASHES: [ChordDegree, ChordDegree][] = [
  ['3', 'bb7'],
  ['6', 'b13']
]

interface ReadDescriptor {
  degrees: ChordDegree[]
  modifiers: string[]
}

// A screen reads the same few qualities over and over; the package takes 0.4 ms for each.
const known = new Map<string, ReadDescriptor | undefined>()
const MAX_KNOWN = 1000

function readDescriptor(normal: string): ReadDescriptor | undefined {
  if (known.has(normal)) return known.get(normal)
  if (known.size >= MAX_KNOWN) known.clear()
  const read = parseDescriptor(normal)
  known.set(normal, read)
  return read
}

function parseDescriptor(normal: string): ReadDescriptor | undefined {
  const majorSeventh = /(?:M|maj?|major|Δ|\^)7?/u.test(normal)
  // `maj7(9)`: the package wants the word major twice before it takes the ninth as one over a major seventh.
  for (const attempt of majorSeventh ? [normal, `${normal}M`] : [normal]) {
    const read = parse(`C ${attempt}`)
    if ('error' in read) continue
    const { modifiers } = read.input
    const alone = modifiers.includes('power') ? '5' : modifiers.includes('bass') ? 'bass' : undefined
    if (alone !== undefined && modifiers.length > 1) return undefined
    // "Altered" says all about a dominant's tensions; over anything else it says nothing.
    if (modifiers.includes('alt') && modifiers.some((modifier) => !WITH_ALT.has(modifier))) return undefined
    const { intervals } = read.normalized
    if (CLASHES.some((pair) => pair.every((degree) => intervals.includes(degree)))) return undefined
    return { degrees: intervals, modifiers: [...modifiers] }
  }
  return undefined
}

function kindOf(degrees: ChordDegree[], { altered, suspendedSecond }: { altered: boolean; suspendedSecond: boolean }) {
  const has = (degree: ChordDegree) => degrees.includes(degree)
  if (altered) return 'altered'
  if (has('b3')) return !has('b5') ? 'minor' : has('b7') ? 'half-diminished' : 'diminished'
  if (has('3')) return has('b7') ? 'dominant' : has('#5') ? 'augmented' : 'major'
  return suspendedSecond || has('4') || has('11') ? 'sus' : 'power'
}

const refused = (text: string, reason: string): { ok: false; error: ChordFault } =>
  err({ message: `“${text.length > 24 ? `${text.slice(0, 24)}…` : text}” ${reason}` })

/**
 * Reads one chord symbol in any usual spelling (`Ebm7b5/A`, `E♭ø`, `C-Δ7`, `F7(b9,#11)`, `N.C.`).
 * Never throws; a fault is a sentence for the person who typed it.
 */
export function readChord(text: string): Result<Chord, ChordFault> {
  if (text.length > MAX_CHORD_TEXT)
    return refused(text, `is longer than a chord symbol can be (${MAX_CHORD_TEXT} characters)`)
  const plain = plainSigns(text)
  if (plain === '') return err({ message: 'No chord is written' })
  if (isNoChordText(plain)) return ok({ noChord: true })
  const cut = cutSymbol(plain)
  if (!cut) return refused(text, 'does not begin with a note from A to G')
  const read = readDescriptor(cut.normal)
  if (!read)
    return refused(text, `is not a chord we can read: what does “${cut.descriptor}” mean after ${noteText(cut.root)}?`)
  return ok(soundingChord(cut.root, cut.bass, cut.descriptor, read))
}

function soundingChord(root: NoteName, bass: NoteName | null, descriptor: string, read: ReadDescriptor): SoundingChord {
  const { degrees, modifiers } = read
  const marks = { altered: modifiers.includes('alt'), suspendedSecond: modifiers.includes('sus2') }
  const pcs = [...new Set(degrees.map((degree) => SEMITONES[degree] ?? 0))].sort((a, b) => a - b)
  return {
    root: pitchClassOf(root),
    rootName: noteText(root),
    bass: bass ? pitchClassOf(bass) : null,
    bassName: bass ? noteText(bass) : null,
    pcs,
    kind: kindOf(degrees, marks),
    degrees: [...degrees],
    ...marks,
    descriptor
  }
}
