// A database for every test file, copied from one that was migrated and filled with people once.
import { execFile } from 'node:child_process'
import { createHash, randomBytes } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { join } from 'node:path'
import { promisify } from 'node:util'
import pg from 'pg'
import { connect } from '@server/db/knex'
import { startQueue } from '@server/jobs/queue'
import { seedPersonas } from '../../seeds/01_personas.ts'
import { quietLogger } from './logs.ts'
import { seedStrangers } from './people.ts'

const root = fileURLToPath(new URL('../../', import.meta.url))
/** Any number: those who make the template wait for each other on it. */
const templateLock = 40_317

export const serverUrl = (): string => {
  const url = process.env['TEST_DATABASE_URL']
  if (!url) throw new Error('TEST_DATABASE_URL is not set: run these tests with npm test')
  return url
}

const urlOf = (database: string): string => {
  const url = new URL(serverUrl())
  url.pathname = `/${database}`
  return url.href
}

/** Changes whenever the tables or the people would. */
const templateName = (): string => {
  const hash = createHash('sha256')
  const migrations = readdirSync(join(root, 'migrations')).map((name) => join('migrations', name))
  for (const file of [...migrations, 'seeds/01_personas.ts', 'tests/support/people.ts'])
    hash.update(readFileSync(join(root, file)))
  return `template_${hash.digest('hex').slice(0, 12)}`
}

const withServer = async <T>(work: (client: pg.Client) => Promise<T>): Promise<T> => {
  const client = new pg.Client({ connectionString: serverUrl() })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}

const fillTemplate = async (url: string): Promise<void> => {
  await promisify(execFile)(process.execPath, ['--import', 'tsx', 'server/cli/migrate.ts'], {
    cwd: root,
    env: { ...process.env, DATABASE_URL: url }
  })
  const db = connect(url)
  try {
    await db.transaction(async (trx) => {
      await seedPersonas(trx, new Date())
      await seedStrangers(trx)
    })
  } finally {
    await db.destroy()
  }
  const queue = await startQueue(url, quietLogger, 'server')
  await queue.stop()
}

const ensureTemplate = async (): Promise<string> => {
  const name = templateName()
  await withServer(async (client) => {
    await client.query('select pg_advisory_lock($1)', [templateLock])
    const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [name])
    if (rowCount) return
    // Under another name until it is whole, so that a killed run leaves no half-filled template.
    const draft = `${name}_${randomBytes(4).toString('hex')}`
    await client.query(`create database ${pg.escapeIdentifier(draft)}`)
    await fillTemplate(urlOf(draft))
    await client.query(`alter database ${pg.escapeIdentifier(draft)} rename to ${pg.escapeIdentifier(name)}`)
  })
  return name
}

export interface TestDatabase {
  url: string
  drop(): Promise<void>
}

/** A fresh database with the people of seeds/01_personas.ts and a group of strangers. */
export const createTestDatabase = async (): Promise<TestDatabase> => {
  const template = await ensureTemplate()
  const name = `test_${randomBytes(6).toString('hex')}`
  await withServer((client) =>
    client.query(`create database ${pg.escapeIdentifier(name)} template ${pg.escapeIdentifier(template)}`)
  )
  return {
    url: urlOf(name),
    drop: () =>
      withServer(async (client) => {
        await client.query(`drop database if exists ${pg.escapeIdentifier(name)} with (force)`)
      })
  }
}
