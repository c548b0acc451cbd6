// What the file of a passage holds, in words, and what it is called.
import { clipSec } from '@shared/audio/clips/plan-clip'
import type { ClipSettings } from '@shared/contracts/clips'
import { clickWords } from '@shared/practice/click-pattern'
import type { BarMap } from '@shared/timing/bar-map'
import { timeWords } from '@shared/timing/time-words'
import type { Span } from '@shared/timing/types'

const percent = (rate: number): string => `${Math.round(rate * 1000) / 10} %`

const signed = (count: number): string => `${count > 0 ? '+' : '−'}${Math.abs(count)}`

/** `+12 semitones`; null when everything is as played. */
const pitchWords = ({ semitones, aids }: ClipSettings): string | null => {
  const whole = semitones + (aids.isOctaveUp ? 12 : 0)
  const parts = [
    whole === 0 ? null : `${signed(whole)} ${Math.abs(whole) === 1 ? 'semitone' : 'semitones'}`,
    aids.cents === 0 ? null : `${signed(aids.cents)} ${Math.abs(aids.cents) === 1 ? 'cent' : 'cents'}`
  ].filter((part) => part !== null)
  return parts.length > 0 ? parts.join(' and ') : null
}

const sideWords = { left: 'left side', right: 'right side', middle: 'the middle', sides: 'the sides' }

/**
 * Its parts, one by one: `60 % speed`, `+12 semitones`, `low focus to 300 Hz`, `left side`, `click on every beat`,
 * `one bar count-in`, `0:42.0 long`.
 */
export const clipWords = (settings: ClipSettings, map: BarMap | null): string[] => {
  const { rate, aids, click, countIn, span } = settings
  return [
    rate === 1 ? 'full speed' : `${percent(rate)} speed`,
    pitchWords(settings),
    aids.lowFocus.isOn ? `low focus to ${Math.round(aids.lowFocus.topHz)} Hz` : null,
    aids.channel === 'both' ? null : sideWords[aids.channel],
    map && click ? `click: ${clickWords(click, map.meterAt(map.barAt(span.startSec)))}` : null,
    map && countIn !== 'none' ? `${countIn} count-in` : null,
    `${timeWords(clipSec(settings, map))} long`
  ].filter((part) => part !== null)
}

export interface ClipNaming {
  title: string
  /** `bars 17 to 20, 2nd chorus`; null names it after the take's own bars, or times where there are none. */
  place: string | null
  map: BarMap | null
}

/** `Second try, bars 17 to 20, 2nd chorus, 60 %.wav`: as a person would write it. */
export const clipFileName = ({ title, place, map }: ClipNaming, { span, rate, format }: ClipSettings): string => {
  const speed = rate === 1 ? '' : `, ${Math.round(rate * 100)} %`
  return `${title.trim()}, ${place?.trim() ?? placeIn(span, map)}${speed}.${format}`
}

const placeIn = (span: Span, map: BarMap | null): string => {
  const bars = map?.barsIn(span) ?? []
  const [first, last] = [bars[0], bars.at(-1)]
  if (first === undefined || last === undefined)
    return `${timeWords(span.startSec)} to ${timeWords(span.endSec)}`.replaceAll(':', '.')
  return first === last ? `bar ${first}` : `bars ${first} to ${last}`
}
