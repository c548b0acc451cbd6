// Ending in order: on a signal, or when the process that started us is gone.
import type { Logger } from '@server/logger'

export const onShutdown = (log: Logger, work: () => Promise<void>): void => {
  let isEnding = false
  const end = (): void => {
    if (isEnding) return
    isEnding = true
    work().then(
      () => process.exit(0),
      (error: unknown) => {
        log.error('http', 'did not end in order', error)
        process.exit(1)
      }
    )
  }
  process.on('SIGTERM', end)
  process.on('SIGINT', end)
  process.on('disconnect', end)
  // One bad promise must not take a room full of people down (ASVS V16.5.4).
  process.on('unhandledRejection', (error) => log.error('http', 'a failure nobody waited for', error))
}
