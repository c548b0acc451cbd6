const units = ['bytes', 'KB', 'MB', 'GB', 'TB'] as const

/** `3.2 MB`, counted in 1024s as file managers mostly do. */
export const bytesWords = (bytes: number): string => {
  let value = Math.max(0, bytes)
  let unit = 0
  while (value >= 1024 && unit < units.length - 1) {
    value /= 1024
    unit += 1
  }
  const digits = unit === 0 || value >= 100 ? 0 : 1
  return `${value.toFixed(digits).replace(/\.0$/, '')} ${units[unit]}`
}
