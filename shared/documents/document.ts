// What every edited thing (bar map, chart, later line and review) is made of: a body, typed operations that can be
// undone, and the parts an operation touches, so that edits of different parts merge and edits of the same part conflict.
import type { z } from 'zod'
import type { Result } from '@shared/result'

export interface OperationFault {
  /** A sentence for the person who made the edit. */
  message: string
  /** Where in the operation the fault is. */
  path?: (string | number)[]
}

export interface DocumentKind<Body, Op> {
  name: string
  body: z.ZodType<Body>
  operation: z.ZodType<Op>
  empty: Body
  /** The body after the operation, or why it cannot be. Never throws, never changes `body`. */
  apply(body: Body, op: Op): Result<Body, OperationFault>
  /** The operations that take `op` back, in order, given the body before it. */
  invert(before: Body, op: Op): Op[]
  /** Names of the parts an operation touches given the body it is applied to; `*` touches everything. */
  parts(before: Body, op: Op): string[]
}
