// One JSON line an entry, a closed list of categories, no bodies, no names of files or people.
export type LogCategory = 'http' | 'db' | 'job' | 'session' | 'media' | 'auth'
type Level = 'info' | 'warn' | 'error'
type Fields = Record<string, string | number | boolean | null | undefined>

export interface Logger {
  info(category: LogCategory, message: string, fields?: Fields): void
  warn(category: LogCategory, message: string, fields?: Fields): void
  error(category: LogCategory, message: string, error: unknown, fields?: Fields): void
}

export const createLogger = (write: (line: string) => void, now: () => Date = () => new Date()): Logger => {
  // JSON.stringify escapes CR and LF, so that a value can never start a second line (ASVS V16.4.1).
  const entry = (level: Level, category: LogCategory, message: string, fields: Fields = {}) =>
    write(`${JSON.stringify({ at: now().toISOString(), level, category, message, ...fields })}\n`)
  return {
    info: (category, message, fields) => entry('info', category, message, fields),
    warn: (category, message, fields) => entry('warn', category, message, fields),
    error: (category, message, error, fields) =>
      entry('error', category, message, {
        ...fields,
        error: error instanceof Error ? error.message : String(error),
        stack: error instanceof Error ? error.stack : undefined
      })
  }
}
