// The real server in a process of its own.
import pg from 'pg'
import { buildTake } from '../support/build.ts'
import { startApp, type TestApp } from '../support/app.ts'
import { createTestDatabase, type TestDatabase } from '../support/database.ts'
import { serveQuestions } from './processes.ts'
import type { LongTake } from './sound.ts'
import { addComments, addLongTake } from './take-rows.ts'

export interface AppPlace {
  url: string
  databaseUrl: string
  /** Of the member who asks. */
  cookie: string
}
export type AppQuestion =
  | { ask: 'place' }
  | { ask: 'take with comments'; comments: number }
  | { ask: 'long take'; take: LongTake; bars: number; comments: number }
  | { ask: 'count statements' }
  | { ask: 'statements' }

let database: TestDatabase | undefined
let app: TestApp | undefined
/** What was sent to the database, by the server's pool and by that of the sign-in alike. */
let statements: string[] = []

const countStatements = (): void => {
  const query = pg.Client.prototype.query as (...args: unknown[]) => unknown
  const counted = function (this: pg.Client, ...args: unknown[]): unknown {
    const [first] = args
    const text = typeof first === 'string' ? first : ((first as { text?: string } | undefined)?.text ?? '')
    // The queue looks for work by itself.
    if (!text.includes('pgboss')) statements.push(text)
    return query.apply(this, args)
  }
  pg.Client.prototype.query = counted as typeof pg.Client.prototype.query
}

const open = async (storageDir: string): Promise<TestApp> => {
  database = await createTestDatabase()
  app = await startApp({ beside: { databaseUrl: database.url, storageDir } })
  return app
}

const answer = async (question: AppQuestion, { storageDir }: { storageDir: string }): Promise<unknown> => {
  const running = app ?? (await open(storageDir))
  switch (question.ask) {
    case 'place': {
      const { cookie } = await running.as('ines')
      return { url: running.url, databaseUrl: running.databaseUrl, cookie } satisfies AppPlace
    }
    case 'take with comments': {
      const takeId = await buildTake(running)
      await addComments(running, takeId, question.comments, 600)
      return takeId
    }
    case 'long take':
      return addLongTake(running, question.take, question)
    case 'count statements':
      countStatements()
      statements = []
      return null
    case 'statements':
      return statements
  }
}

serveQuestions<{ storageDir: string }, AppQuestion>(answer, async () => {
  await app?.close()
  await database?.drop()
})
