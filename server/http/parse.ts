// Reads what came from outside against its schema, for routes and socket events alike.
import type { z } from 'zod'
import { problem, type ProblemField } from '@shared/errors/problems'
import { fieldsOf } from '@server/http/problem'

/** NUL and halves of surrogate pairs: legal in JSON, but no database text or jsonb keeps them. */
const unkeepable = /\0|[\uD800-\uDBFF](?![\uDC00-\uDFFF])|(?<![\uD800-\uDBFF])[\uDC00-\uDFFF]/

const unkeepablePath = (value: unknown, path: (string | number)[] = []): (string | number)[] | null => {
  if (typeof value === 'string') return unkeepable.test(value) ? path : null
  if (typeof value !== 'object' || value === null) return null
  for (const [key, inner] of Object.entries(value)) {
    const found = unkeepable.test(key) ? path : unkeepablePath(inner, [...path, key])
    if (found) return found
  }
  return null
}

export const parseInput = <S extends z.ZodType>(where: ProblemField['in'], schema: S, value: unknown): z.infer<S> => {
  const parsed = schema.safeParse(value)
  if (!parsed.success) throw problem('invalid', { errors: fieldsOf(where, parsed.error) })
  const path = unkeepablePath(parsed.data)
  if (path)
    throw problem('invalid', {
      errors: [{ in: where, path: path.join('.'), message: 'This text has characters that cannot be kept.' }]
    })
  return parsed.data
}
