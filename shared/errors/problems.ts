// Every way a request can fail: code -> status and title (RFC 9457). `throw problem('not-found')` takes only listed codes.
import { z } from 'zod'

export const problems = {
  'bad-request': { status: 400, title: 'That request could not be read' },
  invalid: { status: 422, title: 'Some of what was sent does not fit' },
  'sign-in-needed': { status: 401, title: 'Sign in first' },
  'sign-in-failed': { status: 401, title: 'That e-mail and password do not go together' },
  forbidden: { status: 403, title: 'You may not do that here' },
  'foreign-origin': { status: 403, title: 'This request came from another site' },
  'not-found': { status: 404, title: 'There is nothing here' },
  conflict: { status: 409, title: 'Somebody changed the same place first' },
  'already-there': { status: 409, title: 'That is already there' },
  'nothing-to-undo': { status: 409, title: 'There is nothing to take back' },
  'not-ready': { status: 409, title: 'That is not ready yet' },
  'last-owner': { status: 409, title: 'A group needs an owner' },
  'session-over': { status: 409, title: 'This listening session is over' },
  'not-leading': { status: 403, title: 'Somebody else is leading' },
  gone: { status: 410, title: 'This link cannot be used any more' },
  'precondition-failed': { status: 412, title: 'It is not as it was any more' },
  'too-large': { status: 413, title: 'That is larger than may be sent' },
  'over-quota': { status: 413, title: 'There is no room left for this' },
  'not-audio': { status: 415, title: 'That is not a recording we can read' },
  'range-unsatisfiable': { status: 416, title: 'There is nothing at that place in the file' },
  'too-many': { status: 429, title: 'Too many tries, wait a little' },
  'storage-full': { status: 507, title: 'The server has no room left to store this' },
  unavailable: { status: 503, title: 'The server is not ready, try again in a moment' },
  internal: { status: 500, title: 'Something went wrong on our side' }
} as const

export type ProblemCode = keyof typeof problems

export const ProblemField = z.object({
  in: z.enum(['params', 'query', 'body', 'file']),
  path: z.string(),
  message: z.string()
})
export type ProblemField = z.infer<typeof ProblemField>

/** An application/problem+json body. `current` and `theirs` stand in a conflict: the document now and what others did to it. */
export const ProblemBody = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string().optional(),
  instance: z.string().optional(),
  errors: z.array(ProblemField).optional(),
  current: z.unknown().optional(),
  theirs: z.unknown().optional()
})
export type ProblemBody = z.infer<typeof ProblemBody>

export const problemType = (code: ProblemCode): string => `/problems/${code}`
export const codeOfType = (type: string): ProblemCode | null => {
  const code = type.replace(/^\/problems\//, '')
  return Object.hasOwn(problems, code) ? (code as ProblemCode) : null
}

interface ProblemExtra {
  detail?: string
  errors?: ProblemField[]
  current?: unknown
  theirs?: unknown
  cause?: unknown
}

export class Problem extends Error {
  readonly code: ProblemCode
  readonly extra: ProblemExtra

  constructor(code: ProblemCode, extra: ProblemExtra = {}) {
    super(extra.detail ?? problems[code].title, { cause: extra.cause })
    this.name = 'Problem'
    this.code = code
    this.extra = extra
  }

  get status(): number {
    return problems[this.code].status
  }

  toBody(instance?: string): ProblemBody {
    const { cause: _, ...rest } = this.extra
    return {
      type: problemType(this.code),
      title: problems[this.code].title,
      status: this.status,
      ...rest,
      ...(instance ? { instance } : {})
    }
  }
}

export const problem = (code: ProblemCode, extra?: ProblemExtra): Problem => new Problem(code, extra)
