// Schemas that several contracts use.
import { z } from 'zod'
import { limits } from '@shared/limits'

/** In the one spelling that databases and folders give back: lower case. */
export const Uuid = z.uuid().regex(/^[^A-Z]*$/)
export const Instant = z.iso.datetime({ offset: true })
export const Seconds = z.number().min(0).max(limits.takeSec)
export const Role = z.enum(['owner', 'teacher', 'member', 'listener'])
export type Role = z.infer<typeof Role>

/** One line of text as people type names and titles: no control characters. */
export const line = (max: number) =>
  z
    .string()
    .min(1)
    .max(max)
    .regex(/^[^\p{Cc}]*\S[^\p{Cc}]*$/u, 'Write something here, on one line.')

/** Text of several lines: no control characters but line breaks and tabs. */
export const paragraph = (max: number) =>
  z
    .string()
    .min(1)
    .max(max)
    .regex(/^(?:[^\p{Cc}]|[\n\r\t])*$/u, 'This text has characters that cannot be shown.')
    .regex(/\S/, 'Write something here.')

export const Person = z.object({ id: Uuid, name: z.string() })
export type Person = z.infer<typeof Person>

/** Query strings are text: this is a whole number written in digits. */
export const digits = z.string().regex(/^\d{1,15}$/, 'A whole number.')

export const PageQuery = z.object({ cursor: z.string().max(200).optional(), limit: digits.optional() })
export const page = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), nextCursor: z.string().nullable() })
