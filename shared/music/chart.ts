// Bars as typed: which chord stands on which beat, and what a bar that repeats or goes on sounds.
import { err, ok, type Result } from '@shared/result'
import { readChord, type Chord, type ChordFault } from '@shared/music/chord'
import { beatsPerBar, pulsesPerBar, writeMeter } from '@shared/timing/meter'
import { compare, rational } from '@shared/timing/rational'
import type { Meter, Rational } from '@shared/timing/types'

/** A chord where it begins in its bar; `beat` from 1 in units of the meter's lower figure. */
export interface BarChord {
  beat: Rational
  /** As typed. */
  text: string
  chord: Chord
}

/** What a typed bar says: chords, the bar before once more (`%`), or nothing new (empty, or only `/`). */
export type BarContent = { kind: 'chords'; chords: BarChord[] } | { kind: 'repeat' } | { kind: 'continue' }

/** What sounds in a bar: the first chord is on beat 1 unless nothing was written before it. */
export interface SoundingBar {
  chords: SoundingBarChord[]
}

export interface SoundingBarChord extends BarChord {
  /** True when it is not written in this bar but goes on or comes back from an earlier one. */
  carried: boolean
}

/** Longest text of one bar. */
export const MAX_BAR_TEXT = 120

/** Most words in one bar: sixteen beats with chords written in two words. */
const MAX_BAR_WORDS = 32

const HOLDS = new Set(['.', '/', '-', '–', '−'])
const REPEATS = new Set(['%', '𝄎'])

/** Cuts a bar at blanks that are not inside brackets; `C maj7` and `F sharp m` stay one chord. */
function barWords(text: string): string[] {
  const cut: string[] = []
  let depth = 0
  for (const word of text.split(/\s+/u).filter(Boolean)) {
    if (depth > 0) cut[cut.length - 1] += ` ${word}`
    else cut.push(word)
    for (const sign of word) depth = Math.max(0, depth + (sign === '(' ? 1 : sign === ')' ? -1 : 0))
  }
  return cut.reduce<string[]>((words, word) => {
    const before = words.at(-1)
    const belongs =
      before !== undefined &&
      !isSign(before) &&
      !isSign(word) &&
      !readChord(word).ok &&
      readChord(`${before} ${word}`).ok
    return belongs ? [...words.slice(0, -1), `${before} ${word}`] : [...words, word]
  }, [])
}

const isSign = (word: string): boolean => HOLDS.has(word) || REPEATS.has(word)

/** Beats, from 1, on which `count` chords stand that share a bar: as even as felt beats allow, the longer first. */
function evenBeats(count: number, meter: Meter): Rational[] | undefined {
  const units = [pulsesPerBar(meter), beatsPerBar(meter), 2 * beatsPerBar(meter)].find((some) => count <= some)
  if (units === undefined) return undefined
  return Array.from({ length: count }, (_, index) =>
    rational(Math.ceil((index * units) / count) * beatsPerBar(meter) + units, units)
  )
}

/** Reads one bar. The fault names what cannot be read, not the bar: the caller knows its number. */
export function readBar(text: string, meter: Meter): Result<BarContent, ChordFault> {
  if (text.length > MAX_BAR_TEXT) return err({ message: `A bar holds at most ${MAX_BAR_TEXT} characters` })
  if (text.includes('|')) return err({ message: 'A bar line stands inside the bar' })
  if (text.split(/\s+/u).length > MAX_BAR_WORDS) return err({ message: 'More is written than a bar can hold' })
  const words = barWords(text)
  if (words.every((word) => HOLDS.has(word))) return ok({ kind: 'continue' })
  if (words.some((word) => REPEATS.has(word)))
    return words.length === 1
      ? ok({ kind: 'repeat' })
      : err({ message: '% repeats a whole bar and stands alone in it' })
  const beats = beatsOfWords(words, meter)
  if (!beats.ok) return beats
  const chords: BarChord[] = []
  for (const [index, word] of words.entries()) {
    if (HOLDS.has(word)) continue
    const chord = readChord(word)
    if (!chord.ok) return chord
    chords.push({ beat: beats.value[index] ?? rational(1), text: word, chord: chord.value })
  }
  return ok({ kind: 'chords', chords })
}

function beatsOfWords(words: string[], meter: Meter): Result<Rational[], ChordFault> {
  const beats = beatsPerBar(meter)
  if (!words.some((word) => HOLDS.has(word))) {
    const even = evenBeats(words.length, meter)
    return even ? ok(even) : err({ message: `${words.length} chords are too many for a bar of ${writeMeter(meter)}` })
  }
  // Written out beat by beat: every beat, every felt beat, or every half of a cut-time beat has its sign.
  const slots = [beats, pulsesPerBar(meter), ...(meter.lower <= 2 ? [2 * beats] : [])]
  if (!slots.includes(words.length))
    return err({ message: `${words.length} beats are written, a bar of ${writeMeter(meter)} has ${beats}` })
  return ok(words.map((_, index) => rational(index * beats + words.length, words.length)))
}

/** The chords written in a bar, in order; none for `%` and for a bar that goes on. */
export function chordsOfBar(text: string, meter: Meter): Result<BarChord[], ChordFault> {
  const content = readBar(text, meter)
  if (!content.ok) return content
  return ok(content.value.kind === 'chords' ? content.value.chords : [])
}

const FIRST_BEAT = rational(1)

const carry = (chords: SoundingBarChord[]): SoundingBarChord[] => chords.map((chord) => ({ ...chord, carried: true }))

/** What sounds in bars that follow each other: `%` brings the bar before back, other gaps let the last chord go on. */
export function soundingBars(texts: string[], meter: Meter): SoundingBar[] {
  const bars: SoundingBar[] = []
  for (const text of texts) {
    const before = bars.at(-1)?.chords ?? []
    const content = readBar(text, meter)
    if (content.ok && content.value.kind === 'repeat') {
      bars.push({ chords: carry(before) })
      continue
    }
    const written = content.ok && content.value.kind === 'chords' ? content.value.chords : []
    const last = before.at(-1)
    const opensLate = !written[0] || compare(written[0].beat, FIRST_BEAT) > 0
    bars.push({
      chords: [
        ...(opensLate && last ? carry([{ ...last, beat: FIRST_BEAT }]) : []),
        ...written.map((chord) => ({ ...chord, carried: false }))
      ]
    })
  }
  return bars
}

/** The chord that sounds on a beat (from 1) of a bar; null before the first written one. */
export const chordInBar = (bar: SoundingBar, beat: Rational): SoundingBarChord | null =>
  bar.chords.filter((chord) => compare(chord.beat, beat) <= 0).at(-1) ?? null
