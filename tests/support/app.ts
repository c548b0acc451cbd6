// The whole server on a port of its own, and people who use it.
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import request from 'supertest'
import type { RouteDef } from '@shared/contracts/route'
import { type App, type AppDeps, buildApp } from '@server/app'
import type { Config } from '@server/config'
import { createTestDatabase } from './database.ts'
import { captureLogs } from './logs.ts'
import { type AskerKey, emailOf, password, type PersonKey } from './people.ts'

export interface StartOptions extends Partial<Pick<AppDeps, 'now' | 'limitScale' | 'bounds'>> {
  config?: Partial<Config>
  /** A second server on the same database and storage. */
  beside?: Pick<TestApp, 'databaseUrl' | 'storageDir'>
}

export type Method = Lowercase<RouteDef['method']> | 'head' | 'options'

/** Sends requests as one person (or nobody) from our own page. */
export interface Person {
  key: AskerKey
  cookie: string
  send(method: Method, path: string): request.Test
}

export interface TestApp extends App {
  url: string
  databaseUrl: string
  storageDir: string
  logs: ReturnType<typeof captureLogs>
  /** Signed in once, with a cookie of their own. */
  as(key: AskerKey): Promise<Person>
  /** A sign-in more, of the same person. */
  signInAgain(key: PersonKey): Promise<Person>
}

export const cookieOf = (response: request.Response): string => {
  const set = response.get('Set-Cookie')?.[0]
  if (!set) throw new Error(`no cookie came with ${response.status} ${response.text}`)
  return set.split(';')[0] ?? ''
}

const testConfig = (databaseUrl: string, storageDir: string): Config => ({
  port: 0,
  host: '127.0.0.1',
  tls: null,
  trustProxy: null,
  databaseUrl,
  storageDir,
  smtpUrl: null,
  sessionSecret: 'a secret for tests only, long enough for it',
  isSecure: false,
  isDev: false
})

/** What a build would have left: the page and one file. */
const writePage = (storageDir: string): void => {
  mkdirSync(join(storageDir, 'build', 'assets'), { recursive: true })
  const page = '<!doctype html><title>Plumbline</title><style nonce="__PLUMBLINE_NONCE__"></style><div id="root"></div>'
  writeFileSync(join(storageDir, 'build', 'index.html'), page)
  writeFileSync(join(storageDir, 'build', 'assets', 'main-0.js'), 'export {}')
}

export const startApp = async (options: StartOptions = {}): Promise<TestApp> => {
  const database = options.beside ? null : await createTestDatabase()
  const databaseUrl = options.beside?.databaseUrl ?? database?.url ?? ''
  const storageDir = options.beside?.storageDir ?? mkdtempSync(join(tmpdir(), 'plumbline-test-'))
  if (!options.beside) writePage(storageDir)
  const logs = captureLogs()
  const { config, now = Date.now, limitScale = 1000, bounds } = options
  const app = await buildApp({
    config: { ...testConfig(databaseUrl, storageDir), ...config },
    log: logs.log,
    now,
    limitScale,
    ...(bounds ? { bounds } : {})
  })
  await new Promise<void>((listening) => app.http.listen(config?.port ?? 0, '127.0.0.1', listening))
  const url = `http://127.0.0.1:${(app.http.address() as AddressInfo).port}`

  const personWith = (key: AskerKey, cookie: string): Person => ({
    key,
    cookie,
    send: (method, path) => {
      const test = request(url)[method](path).set('Origin', url)
      return cookie ? test.set('Cookie', cookie) : test
    }
  })
  const signInAgain = async (key: PersonKey): Promise<Person> => {
    const response = await request(url)
      .post('/api/sign-in')
      .set('Origin', url)
      .send({ email: emailOf(key), password })
    return personWith(key, cookieOf(response))
  }
  const people = new Map<AskerKey, Promise<Person>>()
  const as = (key: AskerKey): Promise<Person> => {
    const known = people.get(key)
    if (known) return known
    const made = key === 'anonymous' ? Promise.resolve(personWith(key, '')) : signInAgain(key)
    people.set(key, made)
    return made
  }
  return {
    ...app,
    url,
    databaseUrl,
    storageDir,
    logs,
    as,
    signInAgain,
    close: async () => {
      await app.close()
      if (!database) return
      await database.drop()
      rmSync(storageDir, { recursive: true, force: true })
    }
  }
}
