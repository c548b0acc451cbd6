// What every request passes before any route: request id, headers, foreign origins, rate limits.
import { randomUUID } from 'node:crypto'
import type { RequestHandler } from 'express'
import helmet from 'helmet'
import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible'
import { problem } from '@shared/errors/problems'

export const requestId: RequestHandler = (_req, res, next) => {
  res.locals.requestId = randomUUID()
  res.set('X-Request-Id', res.locals.requestId as string)
  next()
}

/** Content security policy and companions (ASVS V3.4). Nothing is loaded from elsewhere. */
export const headers = (isSecure: boolean): RequestHandler[] => [
  helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"],
        // The wasm of the in-browser trimmer needs its own word; no inline script, no eval.
        scriptSrc: ["'self'", "'wasm-unsafe-eval'"],
        styleSrc: ["'self'"],
        // wavesurfer and engraving set sizes on elements through their style attribute.
        styleSrcAttr: ["'unsafe-inline'"],
        fontSrc: ["'self'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        mediaSrc: ["'self'", 'blob:'],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        manifestSrc: ["'self'"],
        formAction: ["'self'"],
        baseUri: ["'none'"],
        objectSrc: ["'none'"],
        frameAncestors: ["'none'"]
      }
    },
    strictTransportSecurity: isSecure ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' }
  }),
  (_req, res, next) => {
    res.set('Permissions-Policy', 'microphone=(self), midi=(self), camera=(), geolocation=(), browsing-topics=()')
    // A room with minors in it is for nobody's search engine.
    res.set('X-Robots-Tag', 'noindex, nofollow')
    next()
  }
]

/** True when a request's Origin is our own address: the Host it was sent to. */
export const isOwnOrigin = (origin: string | undefined, host: string | undefined): boolean => {
  if (!origin || !host) return false
  try {
    return new URL(origin).host === host
  } catch {
    return false
  }
}

/** Requests that change something must come from our own page (ASVS V3.5.1). */
export const sameOrigin: RequestHandler = (req, _res, next) => {
  if (req.method === 'GET' || req.method === 'HEAD' || req.method === 'OPTIONS') return next()
  if (!isOwnOrigin(req.get('origin'), req.get('host'))) throw problem('foreign-origin')
  next()
}

export interface RateLimits {
  /** Every request of one address. */
  general: RequestHandler
  /** Tries to sign in: by account and address, and by address alone. Every try counts when it begins, so that many at
      once are no way round. Throws `too-many`. */
  signIn: {
    before(email: string, address: string): Promise<void>
    passed(email: string, address: string): Promise<void>
  }
  /** Opening accounts and trying invitation links, by address. */
  open(address: string): Promise<void>
}

const waitWords = (ms: number): string => {
  const seconds = Math.ceil(ms / 1000)
  return seconds < 90 ? `Try again in ${seconds} seconds.` : `Try again in ${Math.ceil(seconds / 60)} minutes.`
}
const refuse = (error: unknown): never => {
  if (error instanceof RateLimiterRes) throw problem('too-many', { detail: waitWords(error.msBeforeNext) })
  throw error
}

/** `scale` multiplies every limit: tests drive many people from one address. */
export const createRateLimits = (scale = 1): RateLimits => {
  const perAddress = new RateLimiterMemory({ points: 1500 * scale, duration: 60 })
  const perAccount = new RateLimiterMemory({ points: 8, duration: 15 * 60, blockDuration: 15 * 60 })
  const triesOfAddress = new RateLimiterMemory({ points: 60 * scale, duration: 15 * 60 })
  const opening = new RateLimiterMemory({ points: 30 * scale, duration: 15 * 60 })
  const account = (email: string, address: string) => `${email.trim().toLowerCase()} ${address}`
  return {
    general: (req, _res, next) => {
      perAddress.consume(req.ip ?? '').then(
        () => next(),
        (error: unknown) => {
          try {
            refuse(error)
          } catch (fault) {
            next(fault)
          }
        }
      )
    },
    signIn: {
      // Account and address together, so that nobody can lock another person out (ASVS V6.3.1).
      before: async (email, address) => {
        await perAccount.consume(account(email, address)).catch(refuse)
        await triesOfAddress.consume(address).catch(refuse)
      },
      passed: async (email, address) => {
        await Promise.all([perAccount.delete(account(email, address)), triesOfAddress.reward(address)])
      }
    },
    open: async (address) => {
      await opening.consume(address).catch(refuse)
    }
  }
}
