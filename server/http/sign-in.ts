// Sign-in over passport-local and express-session in PostgreSQL (table sign_ins).
import { randomBytes } from 'node:crypto'
import connectPgSimple from 'connect-pg-simple'
import type { Request, RequestHandler } from 'express'
import session from 'express-session'
import passport from 'passport'
import { Strategy as LocalStrategy } from 'passport-local'
import type pg from 'pg'
import type { Actor, SignInControl } from '@server/http/handlers'

export const signInLife = { idleMs: 14 * 24 * 3600_000, absoluteMs: 60 * 24 * 3600_000 }
/** A sign-in in use is written anew this often at most, so that reading is not a write. */
const keepAliveEveryMs = 10 * 60_000

declare module 'express-session' {
  interface SessionData {
    /** When this sign-in began (ms): it ends for good after the absolute life. */
    begunAt?: number
    /** When it was last kept alive (ms). */
    seenAt?: number
  }
}

export interface SignInDeps {
  pool: pg.Pool
  secret: string
  isSecure: boolean
  /** The account of a sign-in; null ends it (deleted or disabled). */
  find(userId: string): Promise<Actor | null>
  check(email: string, password: string): Promise<Actor | null>
  now(): number
}

const PgStore = connectPgSimple(session)
/** Keeping alive only ever changes a row: a sign-in that ended meanwhile does not come back. */
class SignInStore extends PgStore {
  readonly #pool: pg.Pool
  constructor(options: ConstructorParameters<typeof PgStore>[0] & { pool: pg.Pool }) {
    super(options)
    this.#pool = options.pool
  }
  override set(sid: string, kept: session.SessionData, done?: (error?: unknown) => void): void {
    if (kept.seenAt === undefined) return super.set(sid, kept, done as () => void)
    const expire = new Date(kept.seenAt + signInLife.idleMs)
    this.#pool.query('update sign_ins set sess = $2, expire = $3 where sid = $1', [sid, kept, expire]).then(
      () => done?.(),
      (error: unknown) => done?.(error)
    )
  }
}

/** 192 bits from the operating system's generator (ASVS V7.2.3 asks for 128). */
export const newSignInId = (): string => randomBytes(24).toString('base64url')

export const createSignIn = (deps: SignInDeps) => {
  const store = new SignInStore({
    pool: deps.pool,
    tableName: 'sign_ins',
    pruneSessionInterval: 15 * 60,
    createTableIfMissing: false,
    disableTouch: true
  })
  const sessions = session({
    store,
    name: deps.isSecure ? '__Host-plumbline' : 'plumbline',
    secret: deps.secret,
    resave: false,
    saveUninitialized: false,
    rolling: false,
    genid: newSignInId,
    cookie: { httpOnly: true, secure: deps.isSecure, sameSite: 'lax', path: '/', maxAge: signInLife.idleMs }
  })
  const passes = new passport.Passport()
  passes.use(
    new LocalStrategy({ usernameField: 'email' }, (email, password, done) => {
      deps.check(email, password).then(
        (actor) => done(null, actor ?? false),
        (error: unknown) => done(error)
      )
    })
  )
  passes.serializeUser((user, done) => done(null, (user as Actor).id))
  passes.deserializeUser((id: string, done) => {
    deps.find(id).then(
      (actor) => done(null, actor ?? false),
      (error: unknown) => done(error)
    )
  })
  const expire: RequestHandler = (req, _res, next) => {
    const begun = req.session.begunAt
    if (begun === undefined || deps.now() - begun < signInLife.absoluteMs) return next()
    req.session.regenerate((error) => next(error))
  }
  const keepAlive: RequestHandler = (req, _res, next) => {
    const { begunAt, seenAt = begunAt } = req.session
    if (seenAt !== undefined && deps.now() - seenAt > keepAliveEveryMs) req.session.seenAt = deps.now()
    next()
  }
  return {
    store,
    /** In order, for express and for the socket handshake. */
    middleware: [sessions, expire, keepAlive, passes.initialize(), passes.session()] as RequestHandler[],
    control: (req: Request): SignInControl => signInControl(req, passes, deps.now),
    close: () => store.close()
  }
}
export type SignIn = ReturnType<typeof createSignIn>

/** What a handler may do to the browser's sign-in. Beginning one renews the id (ASVS V7.2.4). */
const signInControl = (req: Request, passes: passport.Authenticator, now: () => number): SignInControl => ({
  // The strategy reads the body that the contract has already parsed.
  check: () =>
    new Promise((done, fail) => {
      const settled = (error: unknown, actor: Actor | false) => (error ? fail(error) : done(actor || null))
      passes.authenticate('local', { session: false }, settled)(req, req.res, fail)
    }),
  begin: (userId) =>
    new Promise((done, fail) => {
      // passport makes a new session id here and writes the person into it.
      req.login({ id: userId } as Express.User, (error: unknown) => {
        if (error) return fail(error)
        req.session.begunAt = now()
        req.session.save((saveError: unknown) => (saveError ? fail(saveError) : done()))
      })
    }),
  end: () =>
    new Promise((done, fail) => {
      req.session.destroy((error) => (error ? fail(error) : done()))
      // What the browser kept of recordings goes with the person (ASVS V14.3.1).
      req.res?.set('Clear-Site-Data', '"cache"')
    })
})
