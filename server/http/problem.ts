// The last word on every failure: application/problem+json (RFC 9457), nothing of the inside leaked.
import type { ErrorRequestHandler, Response } from 'express'
import multer from 'multer'
import type { z } from 'zod'
import { Problem, type ProblemField, problem } from '@shared/errors/problems'
import type { Logger } from '@server/logger'
import { StorageFull } from '@server/media/faults'

export const sendProblem = (res: Response, fault: Problem): void => {
  res
    .status(fault.status)
    .type('application/problem+json')
    .set('Cache-Control', 'no-store')
    .send(JSON.stringify(fault.toBody(String(res.locals.requestId ?? ''))))
}

/** Where in the input each fault is, in words for the field. */
export const fieldsOf = (where: ProblemField['in'], error: z.ZodError): ProblemField[] =>
  error.issues.slice(0, 20).map((issue) => ({ in: where, path: issue.path.join('.'), message: issue.message }))

interface PgError {
  code?: string
}
const postgresCode = (error: unknown): string => String((error as PgError)?.code ?? '')

/** Turns what libraries throw into our own codes; null when it is nothing we know. */
export const problemOf = (error: unknown): Problem | null => {
  if (error instanceof Problem) return error
  if (error instanceof multer.MulterError) {
    return error.code === 'LIMIT_FILE_SIZE'
      ? problem('too-large')
      : problem('bad-request', { detail: 'The upload did not have the fields it should.' })
  }
  const http = error as { type?: string; status?: number; code?: string }
  if (http?.type === 'entity.too.large') return problem('too-large')
  if (
    http?.type === 'entity.parse.failed' ||
    http?.type === 'encoding.unsupported' ||
    http?.type === 'charset.unsupported'
  )
    return problem('bad-request')
  if (error instanceof StorageFull || http?.code === 'ENOSPC' || http?.code === 'EDQUOT') return problem('storage-full')
  if (error instanceof URIError) return problem('bad-request')
  if (http?.status === 400) return problem('bad-request')
  if (http?.status === 412) return problem('precondition-failed')
  const code = postgresCode(error)
  // Values that no column takes, where a contract let them through.
  if (code.startsWith('22')) return problem('bad-request')
  // What was pointed at was deleted in the same moment.
  if (code === '23503') return problem('not-found')
  if (code === '23505') return problem('already-there')
  // Connection trouble, restart, too many clients: the same request may work in a moment.
  if (/^(08|57P0|53|40P01|40001)/.test(code) || code === 'ECONNREFUSED' || code === 'ECONNRESET')
    return problem('unavailable')
  if (
    /Timeout acquiring a connection|Connection terminated|Client has encountered/.test(
      String((error as Error)?.message)
    )
  )
    return problem('unavailable')
  return null
}

export const problemHandler =
  (log: Logger): ErrorRequestHandler =>
  (error, req, res, _next) => {
    const known = problemOf(error)
    if (!known || known.status >= 500) {
      log.error('http', 'request failed', error, {
        requestId: String(res.locals.requestId),
        path: req.route?.path as string | undefined
      })
    }
    if (res.headersSent) {
      res.destroy()
      return
    }
    sendProblem(res, known ?? problem('internal'))
  }
