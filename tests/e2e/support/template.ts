// The demo group read once in a run: a database and a folder of recordings that every house is copied from.
import { execFile } from 'node:child_process'
import { createHash, randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import pg from 'pg'
import { startQueue } from '@server/jobs/queue'
import { serverUrl } from '../../support/database.ts'
import { quietLogger } from '../../support/logs.ts'

const execute = promisify(execFile)
export const root = fileURLToPath(new URL('../../../', import.meta.url))
/** Any number: those who make the template wait for each other on it. */
const templateLock = 40_318

/** The folder of this run, with the built pages in it. */
export const roomDir = (): string => {
  const folder = process.env['STORAGE_DIR']
  if (!folder || !existsSync(join(folder, 'build', 'index.html')))
    throw new Error('STORAGE_DIR has no built pages: run these tests with npm test')
  return folder
}

export const urlOf = (database: string): string => {
  const url = new URL(serverUrl())
  url.pathname = `/${database}`
  return url.href
}

export const withServer = async <T>(work: (client: pg.Client) => Promise<T>): Promise<T> => {
  const client = new pg.Client({ connectionString: serverUrl() })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}

export interface Template {
  database: string
  storageDir: string
}

/** Changes whenever tables, demo or the reading of recordings would. */
const templateName = (): string => {
  const hash = createHash('sha256')
  for (const folder of ['migrations', 'seeds', 'seeds/demo', 'server/media'])
    for (const entry of readdirSync(join(root, folder), { withFileTypes: true }).sort((a, b) =>
      a.name < b.name ? -1 : 1
    ))
      if (entry.isFile()) hash.update(readFileSync(join(root, folder, entry.name)))
  return `demo_${hash.digest('hex').slice(0, 12)}`
}

const fill = async (url: string, storageDir: string): Promise<void> => {
  const env = { ...process.env, DATABASE_URL: url, STORAGE_DIR: storageDir }
  for (const script of ['server/cli/migrate.ts', 'server/cli/seed.ts'])
    await execute(process.execPath, ['--import', 'tsx', script], { cwd: root, env })
  const queue = await startQueue(url, quietLogger, 'server')
  await queue.stop()
}

/** Made by whoever needs it first. */
export const ensureTemplate = async (): Promise<Template> => {
  const name = templateName()
  const storageDir = join(roomDir(), name)
  await withServer(async (client) => {
    await client.query('select pg_advisory_lock($1)', [templateLock])
    const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [name])
    if (rowCount && existsSync(storageDir)) return
    // Under another name until it is whole, so that a killed run leaves no half of it.
    const draft = `${name}_${randomBytes(4).toString('hex')}`
    const draftDir = join(roomDir(), draft)
    mkdirSync(draftDir)
    await client.query(`create database ${pg.escapeIdentifier(draft)}`)
    await fill(urlOf(draft), draftDir)
    rmSync(storageDir, { recursive: true, force: true })
    renameSync(draftDir, storageDir)
    await client.query(`drop database if exists ${pg.escapeIdentifier(name)}`)
    await client.query(`alter database ${pg.escapeIdentifier(draft)} rename to ${pg.escapeIdentifier(name)}`)
  })
  return { database: name, storageDir }
}
