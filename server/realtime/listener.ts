// LISTEN on PostgreSQL: wakes when any server or worker committed an event. Connects again by itself.
import pg from 'pg'
import type { Logger } from '@server/logger'

export interface ListenerDeps {
  databaseUrl: string
  channels: Record<string, (payload: string) => void>
  /** After every (re)connection: whatever was said meanwhile must be looked up. */
  onConnected(): void
  log: Logger
}

const againAfterMs = 500

export const createListener = ({ databaseUrl, channels, onConnected, log }: ListenerDeps) => {
  let client: pg.Client | null = null
  let timer: NodeJS.Timeout | null = null
  let isClosed = false

  const again = (): void => {
    if (isClosed || timer) return
    timer = setTimeout(() => {
      timer = null
      void connect()
    }, againAfterMs)
  }
  const connect = async (): Promise<void> => {
    const next = new pg.Client({
      connectionString: databaseUrl,
      application_name: 'plumbline-listener',
      keepAlive: true
    })
    next.on('error', (error) => log.warn('db', 'the listener lost its connection', { error: error.message }))
    next.on('end', again)
    next.on('notification', ({ channel, payload }) => channels[channel]?.(payload ?? ''))
    try {
      await next.connect()
      for (const channel of Object.keys(channels)) await next.query(`listen ${pg.escapeIdentifier(channel)}`)
      client = next
      onConnected()
    } catch {
      await next.end().catch(() => undefined)
      again()
    }
  }
  return {
    start: connect,
    close: async (): Promise<void> => {
      isClosed = true
      if (timer) clearTimeout(timer)
      await client?.end().catch(() => undefined)
    }
  }
}
export type Listener = ReturnType<typeof createListener>
