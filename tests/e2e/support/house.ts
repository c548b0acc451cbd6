// A whole Plumbline for one test file: database and storage of its own with the demo group in it, the real server
// process and the real worker process on a free port, and the built pages.
import { type ChildProcess, execFileSync, spawn } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { once } from 'node:events'
import { mkdirSync, readdirSync, rmSync, symlinkSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { join } from 'node:path'
import pg from 'pg'
import { emailOf, password, type PersonKey } from '../../support/people.ts'
import { ensureTemplate, roomDir, root, urlOf, withServer } from './template.ts'

export interface House {
  url: string
  storageDir: string
  databaseUrl: string
  rows<T extends pg.QueryResultRow>(sql: string, values?: unknown[]): Promise<T[]>
  /** The cookie of a sign-in of this person's, made over the wire. */
  cookieOf(key: PersonKey): Promise<{ name: string; value: string }>
  /** kill -9, as when the machine loses its power. */
  killServer(): Promise<void>
  startServer(): Promise<void>
  /** What server and worker have said so far, for the one who looks for a fault. */
  said(): string
  stop(): Promise<void>
}

const freePort = async (): Promise<number> => {
  const server = createServer().listen(0, '127.0.0.1')
  await once(server, 'listening')
  const { port } = server.address() as AddressInfo
  server.close()
  await once(server, 'close')
  return port
}

/** The template's files under new names: none of them is ever written to again. */
const copyStorage = (from: string, to: string): void => {
  mkdirSync(to)
  for (const name of readdirSync(from)) if (name !== 'build') execFileSync('cp', ['-al', join(from, name), to])
  symlinkSync(join(roomDir(), 'build'), join(to, 'build'))
}

const ended = async (child: ChildProcess): Promise<void> => {
  if (child.exitCode === null && child.signalCode === null) await once(child, 'exit')
}

export const openHouse = async (): Promise<House> => {
  const template = await ensureTemplate()
  const name = `house_${randomBytes(6).toString('hex')}`
  const storageDir = join(roomDir(), name)
  const databaseUrl = urlOf(name)
  await withServer((client) =>
    client.query(`create database ${pg.escapeIdentifier(name)} template ${pg.escapeIdentifier(template.database)}`)
  )
  copyStorage(template.storageDir, storageDir)
  const port = await freePort()
  const url = `http://127.0.0.1:${port}`
  const env = {
    ...process.env,
    NODE_ENV: 'production',
    DATABASE_URL: databaseUrl,
    STORAGE_DIR: storageDir,
    PORT: String(port),
    HOST: '127.0.0.1'
  }
  let words = ''
  const start = (script: string): ChildProcess => {
    const child = spawn(process.execPath, ['--import', 'tsx', script], {
      cwd: root,
      env,
      stdio: ['ignore', 'pipe', 'pipe', 'ipc']
    })
    for (const stream of [child.stdout, child.stderr])
      stream?.on('data', (bytes: Buffer) => {
        words += bytes.toString()
      })
    return child
  }
  let server: ChildProcess | null = null
  const startServer = async (): Promise<void> => {
    const child = start('server/main.ts')
    server = child
    await new Promise<void>((listening, failed) => {
      child.once('message', () => listening())
      child.once('exit', (code) => failed(new Error(`the server ended with ${code}:\n${words}`)))
    })
  }
  const worker = start('server/worker.ts')
  await startServer()

  const pool = new pg.Pool({ connectionString: databaseUrl, max: 2 })
  return {
    url,
    storageDir,
    databaseUrl,
    rows: async <T extends pg.QueryResultRow>(sql: string, values: unknown[] = []) =>
      (await pool.query<T>(sql, values)).rows,
    cookieOf: async (key) => {
      const answer = await fetch(`${url}/api/sign-in`, {
        method: 'POST',
        headers: { origin: url, 'content-type': 'application/json' },
        body: JSON.stringify({ email: emailOf(key), password })
      })
      const [pair = ''] = (answer.headers.get('set-cookie') ?? '').split(';')
      const at = pair.indexOf('=')
      if (!answer.ok || at < 0) throw new Error(`${key} could not sign in: ${answer.status} ${await answer.text()}`)
      return { name: pair.slice(0, at), value: pair.slice(at + 1) }
    },
    killServer: async () => {
      server?.kill('SIGKILL')
      if (server) await ended(server)
    },
    startServer,
    said: () => words,
    stop: async () => {
      for (const child of [server, worker]) child?.kill('SIGTERM')
      await Promise.all([server, worker].map((child) => child && ended(child)))
      await pool.end()
      await withServer((client) => client.query(`drop database if exists ${pg.escapeIdentifier(name)} with (force)`))
      rmSync(storageDir, { recursive: true, force: true })
    }
  }
}
