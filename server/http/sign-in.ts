// Sign-in over passport-local and express-session in PostgreSQL (table sign_ins).
import connectPgSimple from 'connect-pg-simple'
import type { Request, RequestHandler } from 'express'
import session from 'express-session'
import passport from 'passport'
import { Strategy as LocalStrategy } from 'passport-local'
import type pg from 'pg'
import type { Actor, SignInControl } from '@server/http/handlers'

export const signInLife = { idleMs: 14 * 24 * 3600_000, absoluteMs: 60 * 24 * 3600_000 }

declare module 'express-session' {
  interface SessionData {
    /** When this sign-in began (ms): it ends for good after the absolute life. */
    begunAt?: number
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

export const createSignIn = (deps: SignInDeps) => {
  const Store = connectPgSimple(session)
  const store = new Store({
    pool: deps.pool,
    tableName: 'sign_ins',
    pruneSessionInterval: 15 * 60,
    createTableIfMissing: false
  })
  const sessions = session({
    store,
    name: deps.isSecure ? '__Host-plumbline' : 'plumbline',
    secret: deps.secret,
    resave: false,
    saveUninitialized: false,
    rolling: true,
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
    req.session.destroy((error) => next(error))
  }
  return {
    store,
    /** In order, for express and for the socket handshake. */
    middleware: [sessions, expire, passes.initialize(), passes.session()] as RequestHandler[],
    control: (req: Request): SignInControl => signInControl(req, passes),
    close: () => store.close()
  }
}
export type SignIn = ReturnType<typeof createSignIn>

/** What a handler may do to the browser's sign-in. Beginning one renews the id (ASVS V7.2.4). */
const signInControl = (req: Request, passes: passport.Authenticator): SignInControl => ({
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
        req.session.begunAt = Date.now()
        req.session.save((saveError: unknown) => (saveError ? fail(saveError) : done()))
      })
    }),
  end: () =>
    new Promise((done, fail) => {
      req.session.destroy((error) => (error ? fail(error) : done()))
    })
})
