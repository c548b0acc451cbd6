// The routes every document has; nouns make theirs with documentRoutes().
import { z } from 'zod'
import type { Permission } from '@shared/access/permissions'
import { Instant, Person, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'

export const documentState = <B extends z.ZodType>(body: B) =>
  z.object({
    id: Uuid,
    revision: z.number().int(),
    body,
    /** Whether the asker has an edit of their own to take back or to do again. */
    canUndo: z.boolean(),
    canRedo: z.boolean()
  })

/** One edit as it stands in the document's history. */
export const Edit = z.object({
  id: Uuid,
  revision: z.number().int(),
  author: Person,
  at: Instant,
  operations: z.array(z.unknown())
})

interface Input<P extends z.ZodType, B extends z.ZodType, O extends z.ZodType> {
  path: string
  noun: string
  params: P
  body: B
  operation: O
  read: Permission
  write: Permission
  /** Operations that go through the whole body: an edit holds one of them at most, for each costs as much as all of it. */
  whole: readonly string[]
  /** Characters of one edit's operations together, where reading them is work. */
  maxChars?: number
}

export const documentRoutes = <P extends z.ZodType, B extends z.ZodType, O extends z.ZodType>(
  input: Input<P, B, O>
) => {
  const state = documentState(input.body)
  const { params, whole, maxChars = limits.jsonBytes } = input
  const isWhole = (op: unknown): boolean => whole.includes(String((op as { kind?: unknown }).kind))
  return {
    get: defineRoute({
      method: 'GET',
      path: input.path,
      access: input.read,
      summary: `The ${input.noun}`,
      params,
      response: state
    }),
    edit: defineRoute({
      method: 'PATCH',
      path: input.path,
      access: input.write,
      summary: `Edit the ${input.noun}: operations made on baseRevision; 409 with both sides where others touched the same part`,
      params,
      body: z.object({
        /** Made by the client; the same edit sent twice is applied once. */
        id: Uuid,
        baseRevision: z.number().int().min(0),
        operations: z
          .array(input.operation)
          .min(1)
          .max(limits.operationsPerEdit)
          .refine((all) => all.filter(isWhole).length <= 1, 'Change all of it in one edit at a time.')
          .refine((all) => JSON.stringify(all).length <= maxChars, 'Send this in several edits.')
      }),
      response: state
    }),
    undo: defineRoute({
      method: 'POST',
      path: `${input.path}/undo`,
      access: input.write,
      summary: `Take back one's own last edit of the ${input.noun}`,
      params,
      body: z.object({ id: Uuid }),
      response: state
    }),
    redo: defineRoute({
      method: 'POST',
      path: `${input.path}/redo`,
      access: input.write,
      summary: `Do again what one took back last in the ${input.noun}`,
      params,
      body: z.object({ id: Uuid }),
      response: state
    })
  }
}
