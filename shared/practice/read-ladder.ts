// Reads the sentence of a loop that gets faster as people type it.
import { ladderLimits, type SpeedLadder } from '@shared/practice/ladder'
import { err, ok, type Result } from '@shared/result'

/** What is missing or cannot be, and a sentence for the person who typed it. */
export interface LadderFault {
  part: 'from' | 'to' | 'step' | 'every' | 'rest'
  message: string
}

const NUMBER = String.raw`(\d+(?:[.,]\d+)?)\s*(?:%|per ?cent)?`
const WORDS = ['zero', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten']
const RANKS = ['other', 'second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth']
const COUNT = String.raw`(\d+(?:[.,]\d+)?|${[...WORDS, ...RANKS].join('|')})(?:st|nd|rd|th)?`
const PASS = String.raw`(?:time|pass|loop|round|repeat|turn)(?:e?s)?`

const RANGE = new RegExp(String.raw`${NUMBER}\s*(?:(?:up |down )?to|until|till|->|[-–—−→])\s*${NUMBER}`)
const STEP = new RegExp(
  String.raw`(up|down|faster|slower|plus|minus|add|by|steps?(?: of)?|\+|[-–−])\s*(?:by\s*)?${NUMBER}`
)
const INSIDE = new RegExp(String.raw`${NUMBER},?\s*(up|down|by|plus|minus)\s*(?:by\s*)?${NUMBER},?\s*to\s*${NUMBER}`)
const STEP_AFTER = new RegExp(String.raw`${NUMBER}\s*(up|down|faster|slower|more|less)\b`)
const EACH = new RegExp(String.raw`\b(?:after|every|each|per)(?: every| each)? ${PASS}\b|\bonce\b`)
const TWICE = /\b(?:after )?twice\b/
const EVERY = new RegExp(String.raw`\b(?:after|every|each|per)(?: every| each)?\s*${COUNT}(?:\s*(?:${PASS}|x\b|×))?`)
const TIMES = new RegExp(String.raw`\b${COUNT}\s*(?:${PASS}\b|x\b|×)`)

/**
 * `60 % to 100 %, up 5 after 4 times`, `60-100 up 5 every 4`, `from 50 to 90 by 2,5 after each time`, `100 to 70 down 5 twice`:
 * percents of full speed (20 to 150, to the tenth), the step with or without its direction, passes at one speed as a number or
 * a word. `readLadder(ladderWords(ladder))` is the ladder.
 */
export const readLadder = (text: string): Result<SpeedLadder, LadderFault> => {
  const pieces = takeApart(text)
  const { range, step, every, rest } = pieces
  if (!range) return err(missingRange(rest))
  if (!step)
    return err({ part: 'step', message: `Say by how much it changes: ${range.to < range.from ? 'down' : 'up'} 5.` })
  if (every === null) return err({ part: 'every', message: 'Say after how many times it changes: after 4 times.' })
  const extra = /\d+(?:[.,]\d+)?/.exec(rest)
  if (extra) return err({ part: 'rest', message: `One number too many: ${extra[0]}.` })
  return checked(range, step, every)
}

/** Directions: 1 up, -1 down, 0 not said. */
interface Step {
  size: number
  direction: number
}

const takeApart = (text: string) => {
  let rest = ` ${text.toLowerCase().replace(/\s+/g, ' ')} `
  const take = (pattern: RegExp): RegExpExecArray | null => {
    const found = pattern.exec(rest)
    if (found) rest = `${rest.slice(0, found.index)} , ${rest.slice(found.index + found[0].length)}`
    return found
  }
  const takeStep = (): Step | null => {
    const before = take(STEP)
    if (before) return { size: read(before[2]), direction: directionOf(before[1]) }
    const after = take(STEP_AFTER)
    return after && { size: read(after[1]), direction: directionOf(after[2]) }
  }
  const takeEvery = (): number | null => {
    if (take(EACH)) return 1
    if (take(TWICE)) return 2
    const found = take(EVERY) ?? take(TIMES)
    return found && counted(found[1] as string)
  }
  // "from 60 by 5 to 100"
  const inside = take(INSIDE)
  const found = inside ? null : take(RANGE)
  const ends = inside ? [inside[1], inside[4]] : found && [found[1], found[2]]
  return {
    range: ends && { from: read(ends[0]), to: read(ends[1]) },
    step: inside ? { size: read(inside[3]), direction: directionOf(inside[2]) } : takeStep(),
    every: takeEvery(),
    rest
  }
}

const checked = (range: { from: number; to: number }, step: Step, every: number): Result<SpeedLadder, LadderFault> => {
  const [from, to, size] = [share(range.from), share(range.to), share(step.size)]
  for (const [part, rate] of [
    ['from', from],
    ['to', to]
  ] as const) {
    if (rate < ladderLimits.minRate || rate > ladderLimits.maxRate)
      return err({ part, message: 'Speeds go from 20 % to 150 %.' })
  }
  if (from === to) return err({ part: 'to', message: 'It starts and ends at the same speed.' })
  const direction = to > from ? 1 : -1
  if (size === 0) return err({ part: 'step', message: 'With a step of 0 it never gets there.' })
  if (step.direction === -direction) {
    const [is, isNot] = direction > 0 ? ['up', 'down'] : ['down', 'up']
    return err({ part: 'step', message: `From ${range.from} % to ${range.to} % it goes ${is}, not ${isNot}.` })
  }
  if (!Number.isInteger(every) || every < 1 || every > ladderLimits.maxEvery)
    return err({ part: 'every', message: `It changes after a whole number of times, 1 to ${ladderLimits.maxEvery}.` })
  return ok({ from, to, step: direction * size, every })
}

const missingRange = (rest: string): LadderFault => {
  const only = new RegExp(NUMBER).exec(rest)?.[1]
  return only
    ? { part: 'to', message: `Say where it ends: ${only} % to 100 %.` }
    : { part: 'from', message: 'Say where it starts and where it ends: 60 % to 100 %.' }
}

const read = (digits: string | undefined): number => Number((digits ?? '').replace(',', '.'))

/** Percent to a share, to the tenth of a percent. */
const share = (value: number): number => Math.round(value * 10) / 1000

const counted = (word: string): number => {
  if (WORDS.includes(word)) return WORDS.indexOf(word)
  if (RANKS.includes(word)) return word === 'other' ? 2 : RANKS.indexOf(word) + 1
  return read(word)
}

const UP = ['up', 'faster', 'plus', 'add', 'more', '+']
const DOWN = ['down', 'slower', 'minus', 'less', '-', '–', '−']
const directionOf = (word: string | undefined): number =>
  word === undefined ? 0 : UP.includes(word) ? 1 : DOWN.includes(word) ? -1 : 0
