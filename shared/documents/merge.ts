// Applying an edit to a document that others may have changed since.
import type { DocumentKind, OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'

export interface AppliedEdit<Body, Op> {
  body: Body
  /** What takes the whole edit back, in order. */
  inverse: Op[]
  parts: string[]
}

export interface EditFault extends OperationFault {
  /** Which operation of the edit is at fault. */
  index: number
}

/** All operations one after the other, or the first fault; never half of them. */
export const applyAll = <Body, Op>(
  kind: DocumentKind<Body, Op>,
  body: Body,
  operations: readonly Op[]
): Result<AppliedEdit<Body, Op>, EditFault> => {
  let now = body
  let inverse: Op[] = []
  const parts = new Set<string>()
  for (const [index, op] of operations.entries()) {
    const next = kind.apply(now, op)
    if (!next.ok) return err({ ...next.error, index })
    inverse = [...kind.invert(now, op), ...inverse]
    for (const part of kind.parts(now, op)) parts.add(part)
    now = next.value
  }
  return ok({ body: now, inverse, parts: [...parts] })
}

/** Whether two edits touch a part in common; `*` touches everything. */
export const overlap = (one: readonly string[], other: readonly string[]): boolean => {
  if (one.length === 0 || other.length === 0) return false
  if (one.includes('*') || other.includes('*')) return true
  return one.some((part) => other.includes(part))
}
