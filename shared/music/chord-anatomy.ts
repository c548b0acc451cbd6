// The parts a chord symbol is set from, found again from the degrees it sounds: the same parts whatever hand it was typed in.
import type { SoundingChord } from '@shared/music/chord'

export type ChordStem = 'major' | 'minor' | 'augmented' | 'diminished' | 'half-diminished'

export interface Alteration {
  degree: number
  /** −1 flat, +1 sharp. */
  alter: number
}

export interface ChordAnatomy {
  stem: ChordStem
  /** What the figure stands over: `none` with figure 0 or 6 (69 is six-nine), else a seventh of that size. */
  seventh: 'none' | 'minor' | 'major' | 'diminished'
  figure: 0 | 5 | 6 | 7 | 9 | 11 | 13 | 69
  sus: ('2' | '4')[]
  /** Written with "alt". */
  alt: boolean
  /** In rising order of degree. */
  alterations: Alteration[]
  /** Natural degrees added without the ones below them. */
  adds: number[]
  /** A major seventh over a chord that has its own seventh already (a diminished seventh). */
  addsMajorSeventh: boolean
  omits: (3 | 5)[]
  /** Only the root is left. */
  bare: boolean
}

type Has = (...degrees: string[]) => boolean

function stemOf(has: Has): ChordStem {
  if (has('b3') && has('b5') && !has('5')) return has('b7') ? 'half-diminished' : 'diminished'
  if (has('bb7')) return 'diminished'
  if (has('b3')) return 'minor'
  // A raised fifth under a seventh is written as an alteration (7♯5), without one it makes the chord (+).
  return has('3') && has('#5') && !has('b5') && !has('b7') && !has('7') && !has('6') ? 'augmented' : 'major'
}

function seventhOf(has: Has): ChordAnatomy['seventh'] {
  if (has('bb7')) return 'diminished'
  return has('b7') ? 'minor' : has('7') ? 'major' : 'none'
}

/** The highest figure whose tower is whole: a 13 holds a ninth and, over a minor third, an eleventh; an 11 leaves the major third out. */
function figureOf(has: Has, seventh: ChordAnatomy['seventh'], secondHangs: boolean): ChordAnatomy['figure'] {
  if (seventh === 'none') return has('6') ? (has('9') && !secondHangs ? 69 : 6) : 0
  const anyNinth = has('9', 'b9', '#9') && !secondHangs
  const minor = has('b3')
  if (seventh === 'diminished') return 7
  if (has('13') && anyNinth && has('11') === minor) return 13
  if (has('11') && anyNinth && !has('3') && !has('4')) return 11
  return has('9') && anyNinth ? 9 : 7
}

/** Natural degrees that the figure already says. */
function heldBy(figure: number, minor: boolean): number[] {
  if (figure === 6) return [6]
  if (figure === 69) return [6, 9]
  if (figure === 9) return [9]
  if (figure === 11) return [9, 11]
  return figure === 13 ? (minor ? [9, 11, 13] : [9, 13]) : []
}

const ALTERED = ['b5', '#5', 'b6', 'b9', '#9', '#11', 'b13']

function alterationsOf(has: Has, stem: ChordStem): Alteration[] {
  const inStem =
    stem === 'half-diminished' || stem === 'diminished' ? ['b5'] : stem === 'augmented' ? ['#5'] : ([] as string[])
  return ALTERED.filter((degree) => has(degree) && !inStem.includes(degree)).map((degree) => ({
    degree: Number(degree.slice(1)),
    alter: degree.startsWith('b') ? -1 : 1
  }))
}

/** Takes a chord apart. Setting the parts again and reading them gives the same pitch classes. */
export function chordAnatomy(chord: SoundingChord): ChordAnatomy {
  const has: Has = (...degrees) => degrees.some((degree) => chord.degrees.includes(degree))
  const third = has('3', 'b3')
  const secondHangs = chord.suspendedSecond && !third
  const stem = stemOf(has)
  const seventh = seventhOf(has)
  const bare = chord.degrees.length === 1
  const power = !third && chord.degrees.length === 2 && has('5')
  const figure = power ? 5 : figureOf(has, seventh, secondHangs)
  const sus: ('2' | '4')[] = [...(secondHangs ? (['2'] as const) : []), ...(has('4') && !third ? (['4'] as const) : [])]
  const held = heldBy(figure, has('b3'))
  const natural = [4, 6, 9, 11, 13].filter((degree) => has(String(degree)) && !held.includes(degree))
  const omitsThird = !third && sus.length === 0 && figure !== 11 && !power && !bare
  // A flat thirteen takes the fifth's place, but not that of a diminished one.
  const omitsFifth = !has('5', 'b5', '#5') && !bare && (stem === 'diminished' || !has('b13'))
  return {
    stem,
    seventh,
    figure,
    sus,
    alt: chord.altered,
    alterations: chord.altered ? [] : alterationsOf(has, stem),
    adds: natural.filter((degree) => (degree !== 4 || third) && (degree !== 9 || !secondHangs)),
    addsMajorSeventh: seventh === 'diminished' && has('7'),
    omits: [...(omitsThird ? ([3] as const) : []), ...(omitsFifth ? ([5] as const) : [])],
    bare
  }
}
