import type { Sec } from '@shared/units'

/** `m:ss.d`, rounded to the tenth: 83.44 -> `1:23.4`. Minutes go on past 59; before the start it has a minus sign. */
export const timeWords = (sec: Sec): string => {
  const tenths = Math.round((Number.isFinite(sec) ? Math.abs(sec) : 0) * 10)
  const minutes = Math.floor(tenths / 600)
  const seconds = Math.floor((tenths % 600) / 10)
  const sign = sec < 0 && tenths > 0 ? '−' : ''
  return `${sign}${minutes}:${String(seconds).padStart(2, '0')}.${tenths % 10}`
}

const counted = (count: number, noun: string) => `${count} ${noun}${count === 1 ? '' : 's'}`

/**
 * A moment for reading out (a slider's aria-valuetext), rounded down to the second, with further words after it:
 * `spokenTime(123, 'bar 41', 'C minor seventh')` -> `2 minutes 3 seconds, bar 41, C minor seventh`.
 */
export const spokenTime = (sec: Sec, ...words: (string | null)[]): string => {
  const total = Math.max(0, Math.floor(Number.isFinite(sec) ? sec : 0))
  const minutes = Math.floor(total / 60)
  const time = [minutes > 0 ? counted(minutes, 'minute') : null, counted(total % 60, 'second')]
  return [time.filter((part) => part !== null).join(' '), ...words.filter((word) => word)].join(', ')
}
