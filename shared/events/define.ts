// What a socket event is: who may send it, what it carries, what the acknowledgement carries back.
import type { z } from 'zod'
import type { Permission } from '@shared/access/permissions'
import type { ProblemBody } from '@shared/errors/problems'

export interface ClientEventDef<P extends z.ZodType = z.ZodType, R extends z.ZodType = z.ZodType> {
  access: Permission
  payload: P
  reply: R
  /** Most of these a socket may send in a second; more are refused with `too-many`. */
  perSecond: number
}

export const defineEvent = <P extends z.ZodType, R extends z.ZodType>(
  def: ClientEventDef<P, R>
): ClientEventDef<P, R> => def

export type Ack<T> = { ok: true; data: T } | { ok: false; problem: ProblemBody }

type Events = Record<string, ClientEventDef>
export type ClientToServer<E extends Events> = {
  [K in keyof E]: (payload: z.infer<E[K]['payload']>, ack: (answer: Ack<z.infer<E[K]['reply']>>) => void) => void
}
export type ServerToClient<E extends Record<string, z.ZodType>> = { [K in keyof E]: (payload: z.infer<E[K]>) => void }
