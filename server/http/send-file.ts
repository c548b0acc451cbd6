// Sends a stored file with Range, ETag and conditional requests (RFC 9110) through express's own sendFile.
import type { Request, Response } from 'express'
import { problem } from '@shared/errors/problems'
import type { FileAnswer } from '@server/http/handlers'

/** A name as RFC 6266 wants it: plain letters for old readers, the whole name percent-encoded. */
export const contentDisposition = (name: string): string => {
  // By characters, not code units: half a surrogate pair cannot be encoded.
  const clean = [...name.replace(/[\p{Cc}\p{Cf}\p{Cs}/\\]/gu, '')].slice(0, 150).join('') || 'recording'
  const ascii = clean.replace(/[^\w .,()-]/g, '_')
  const encoded = encodeURIComponent(clean).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return `attachment; filename="${ascii}"; filename*=UTF-8''${encoded}`
}

export const sendFileAnswer = (req: Request, res: Response, answer: FileAnswer): Promise<void> => {
  res.type(answer.mime)
  // Uploaded bytes must never act as a page of this site (ASVS V3.2.1, V5.4.1).
  res.set('Content-Security-Policy', "sandbox; default-src 'none'")
  res.set('Cache-Control', `private, max-age=${answer.maxAgeSec ?? 0}, must-revalidate`)
  if (answer.downloadName) res.set('Content-Disposition', contentDisposition(answer.downloadName))
  return new Promise((done, fail) => {
    res.sendFile(answer.file, { cacheControl: false, acceptRanges: true, dotfiles: 'allow' }, (error) => {
      // The listener went away in the middle: nobody is left to tell.
      if (!error || res.headersSent || req.destroyed) return done()
      const status = (error as { status?: number }).status
      res.removeHeader('Content-Disposition')
      // `send` has put the length into Content-Range by now (RFC 9110, 15.5.17).
      if (status === 416) return fail(problem('range-unsatisfiable'))
      fail(status === 404 || (error as NodeJS.ErrnoException).code === 'ENOENT' ? problem('not-found') : error)
    })
  })
}
