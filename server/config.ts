// All configuration, read once from the environment. A fault is named for every key before the process ends.
import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { z } from 'zod'
import { err, ok, type Result } from '@shared/result'

const Port = z
  .string()
  .regex(/^\d{1,5}$/, 'a number')
  .transform(Number)
  .refine((n) => n <= 65535, 'at most 65535')
const file = z.string().refine((path) => existsSync(path), 'no such file')
const TrustProxy = z
  .string()
  .regex(/^(\d{1,2}|loopback|[\d.,:/a-fA-F ]+)$/, 'a number of proxies, "loopback", or addresses')

const Environment = z
  .object({
    NODE_ENV: z.string().default('production').describe('development, test or production'),
    PORT: Port.default(4300).describe('port to listen on'),
    HOST: z.string().min(1).default('127.0.0.1').describe('address to listen on'),
    TLS_CERT: file.optional().describe('certificate (PEM file)'),
    TLS_KEY: file.optional().describe('its key (PEM file)'),
    TRUST_PROXY: TrustProxy.optional().describe('proxies in front whose X-Forwarded headers are believed'),
    DATABASE_URL: z
      .string()
      .regex(/^postgres(ql)?:\/\//, 'an address postgres://…')
      .describe('PostgreSQL; npm start brings its own where this is not given'),
    STORAGE_DIR: z.string().min(1).default('storage').describe('folder for recordings and secrets'),
    SMTP_URL: z
      .string()
      .regex(/^smtps?:\/\//, 'an address smtp://… or smtps://…')
      .optional()
      .describe('mail server; without it letters are kept in the storage folder'),
    SESSION_SECRET: z.string().min(32, 'at least 32 characters').optional().describe('signs the sign-in cookie'),
    PLUMBLINE_DEV: z.string().optional().describe('set by npm run dev: the page comes from Vite')
  })
  .refine((env) => Boolean(env.TLS_CERT) === Boolean(env.TLS_KEY), {
    path: ['TLS_KEY'],
    message: 'TLS_CERT and TLS_KEY go together'
  })

export interface Config {
  port: number
  host: string
  tls: { cert: string; key: string } | null
  trustProxy: string | number | null
  databaseUrl: string
  storageDir: string
  smtpUrl: string | null
  sessionSecret: string
  /** Served over TLS, by us or by a proxy in front: cookies are Secure. */
  isSecure: boolean
  isDev: boolean
}

/** The secret in the storage folder, made on first use and readable by its owner only. */
const keptSecret = (storageDir: string): string => {
  const path = join(storageDir, 'session-secret')
  mkdirSync(storageDir, { recursive: true })
  if (!existsSync(path)) {
    try {
      writeFileSync(path, randomBytes(32).toString('base64url'), { mode: 0o600, flag: 'wx' })
    } catch (error) {
      // Another process made it in this very moment: theirs is as good.
      if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error
    }
  }
  return readFileSync(path, 'utf8')
}

/** The configuration, or one sentence for every fault. Empty variables count as not given. */
export const readConfig = (env: NodeJS.ProcessEnv): Result<Config, string[]> => {
  const given = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''))
  const parsed = Environment.safeParse(given)
  if (!parsed.success) {
    return err(
      parsed.error.issues.map(
        (issue) => `${issue.path.join('.')}: ${issue.message} (${describe(String(issue.path[0]))})`
      )
    )
  }
  const e = parsed.data
  const storageDir = resolve(e.STORAGE_DIR)
  return ok({
    port: e.PORT,
    host: e.HOST,
    tls: e.TLS_CERT && e.TLS_KEY ? { cert: e.TLS_CERT, key: e.TLS_KEY } : null,
    trustProxy:
      e.TRUST_PROXY === undefined ? null : /^\d+$/.test(e.TRUST_PROXY) ? Number(e.TRUST_PROXY) : e.TRUST_PROXY,
    databaseUrl: e.DATABASE_URL,
    storageDir,
    smtpUrl: e.SMTP_URL ?? null,
    sessionSecret: e.SESSION_SECRET ?? keptSecret(storageDir),
    isSecure: Boolean(e.TLS_CERT) || e.TRUST_PROXY !== undefined,
    isDev: e.PLUMBLINE_DEV === '1'
  })
}

const describe = (key: string): string =>
  (Environment.shape as Record<string, z.ZodType>)[key]?.description ?? 'see README'

/** For the entry points: the configuration, or every fault on stderr and exit 78 (EX_CONFIG). */
export const configOrExit = (): Config => {
  const config = readConfig(process.env)
  if (config.ok) return config.value
  process.stderr.write(`The configuration has faults:\n${config.error.map((fault) => `  ${fault}\n`).join('')}`)
  process.exit(78)
}
