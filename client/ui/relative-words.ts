const minuteMs = 60_000
const hourMs = 60 * minuteMs
const dayMs = 24 * hourMs

/** Making a formatter costs far more than using it, and a long margin shows hundreds of times. */
const kept = new Map<string, Intl.RelativeTimeFormat | Intl.DateTimeFormat>()
const once = <F extends Intl.RelativeTimeFormat | Intl.DateTimeFormat>(name: string, make: () => F): F => {
  const known = kept.get(name) as F | undefined
  if (known) return known
  const made = make()
  kept.set(name, made)
  return made
}
const relativeFormat = (locale: string) =>
  once(`relative ${locale}`, () => new Intl.RelativeTimeFormat(locale, { numeric: 'auto' }))
const dateFormat = (locale: string, options: Intl.DateTimeFormatOptions) =>
  once(`date ${locale} ${JSON.stringify(options)}`, () => new Intl.DateTimeFormat(locale, options))

const startOfDay = (date: Date) => new Date(date.getFullYear(), date.getMonth(), date.getDate()).getTime()

/** "just now", "2 hours ago", "yesterday", "on Tuesday", "24 November": as people say it, in the reader's time zone. */
export function relativeWords(then: Date, now: Date, locale = 'en-GB'): string {
  const pastMs = now.getTime() - then.getTime()
  if (!Number.isFinite(pastMs)) return ''
  const relative = relativeFormat(locale)
  const awayMs = Math.abs(pastMs)
  if (awayMs < minuteMs) return 'just now'
  const sign = pastMs > 0 ? -1 : 1
  // Rounded, so that summer time's 23 and 25 hour days count as one.
  const days = Math.round((startOfDay(then) - startOfDay(now)) / dayMs)
  if (awayMs < hourMs) return relative.format(sign * Math.floor(awayMs / minuteMs), 'minute')
  if (days === 0 || awayMs < 6 * hourMs) return relative.format(sign * Math.floor(awayMs / hourMs), 'hour')
  if (Math.abs(days) === 1) return relative.format(days, 'day')
  if (days < 0 && days > -7) return `on ${dateFormat(locale, { weekday: 'long' }).format(then)}`
  const sameYear = then.getFullYear() === now.getFullYear()
  return dateFormat(locale, { day: 'numeric', month: 'long', ...(sameYear ? {} : { year: 'numeric' }) }).format(then)
}

/** "Tuesday 24 November 2026 at 19:05" */
export function exactWords(date: Date, locale = 'en-GB'): string {
  if (!Number.isFinite(date.getTime())) return ''
  return dateFormat(locale, { dateStyle: 'full', timeStyle: 'short' }).format(date)
}
