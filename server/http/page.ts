// The application's page and its built files. Every page gets a nonce of its own for the style that the waveform makes.
import { randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import express, { type RequestHandler, type Router } from 'express'
import { problem } from '@shared/errors/problems'

/** What the build wrote where a nonce goes (vite.config.ts). */
const placeholder = /__PLUMBLINE_NONCE__/g
const yearSec = 31_536_000

export const servePage = (router: Router, buildDir: string): void => {
  let page: string | null = null
  const read = (): string | null => {
    try {
      return readFileSync(join(buildDir, 'index.html'), 'utf8')
    } catch {
      return null
    }
  }
  // Names under assets/ carry a hash of their content.
  const files = express.static(buildDir, {
    index: false,
    setHeaders: (res, path) => {
      res.set(
        'Cache-Control',
        path.includes('/assets/') ? `public, max-age=${yearSec}, immutable` : 'public, max-age=3600'
      )
    }
  })
  // The page itself is never sent as it lies there: it needs its nonce.
  const builtFiles: RequestHandler = (req, res, next) =>
    /^\/index\.html$/i.test(req.path) ? next() : files(req, res, next)
  router.use(builtFiles)
  router.get('/{*path}', (req, res) => {
    if (req.path.startsWith('/api/') || req.path.startsWith('/assets/') || !req.accepts('html'))
      throw problem('not-found')
    page ??= read()
    if (page === null) throw problem('unavailable', { detail: 'The page has not been built yet.' })
    const nonce = randomBytes(16).toString('base64')
    const policy = String(res.getHeader('Content-Security-Policy')).replace(
      "style-src 'self'",
      `style-src 'self' 'nonce-${nonce}'`
    )
    res
      .set('Content-Security-Policy', policy)
      .set('Cache-Control', 'no-store')
      .type('html')
      .send(page.replace(placeholder, nonce))
  })
}
