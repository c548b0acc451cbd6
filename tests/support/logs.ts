// A logger whose lines can be looked at.
import { createLogger, type Logger } from '@server/logger'

export interface LogLine {
  level: 'info' | 'warn' | 'error'
  category: string
  message: string
  error?: string
  stack?: string
}

export const captureLogs = (): { log: Logger; raw: string[]; lines(): LogLine[]; errors(): LogLine[] } => {
  const raw: string[] = []
  const lines = () => raw.map((line) => JSON.parse(line) as LogLine)
  return {
    log: createLogger((line) => raw.push(line)),
    raw,
    lines,
    errors: () => lines().filter((line) => line.level === 'error')
  }
}

export const quietLogger: Logger = createLogger(() => undefined)
