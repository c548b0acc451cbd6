/** Length of a recording for a list, `m:ss`, rounded to the second; hours count on as minutes. */
export const lengthWords = (sec: number): string => {
  const total = Math.max(0, Math.round(Number.isFinite(sec) ? sec : 0))
  return `${Math.floor(total / 60)}:${String(total % 60).padStart(2, '0')}`
}

/** `1 take`, `3 takes`. */
export const counted = (count: number, one: string): string => `${count} ${one}${count === 1 ? '' : 's'}`
