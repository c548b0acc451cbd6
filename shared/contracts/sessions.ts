import { z } from 'zod'
import { Instant, Person, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'

/** The shared playhead: where it was at `atServerMs` and how it goes on from there (shared/timing/session-position.ts). */
export const TransportState = z.object({
  revision: z.number().int(),
  positionSec: z.number().min(0),
  rate: z.number().min(0.2).max(1.5),
  semitones: z.number().min(-12).max(24),
  playing: z.boolean(),
  loop: z.object({ startSec: z.number().min(0), endSec: z.number().min(0) }).nullable(),
  atServerMs: z.number()
})
export type TransportState = z.infer<typeof TransportState>

export const SessionPerson = Person.extend({ isHere: z.boolean(), isAway: z.boolean() })
export type SessionPerson = z.infer<typeof SessionPerson>

export const Session = z.object({
  id: Uuid,
  groupId: Uuid,
  takeId: Uuid,
  takeTitle: z.string(),
  startedBy: Person,
  leaderId: Uuid.nullable(),
  startedAt: Instant,
  endedAt: Instant.nullable(),
  people: z.array(SessionPerson),
  transport: TransportState,
  abilities: z.array(z.string())
})
export type Session = z.infer<typeof Session>

const SessionParams = z.object({ sessionId: Uuid })
export const sessionRoutes = {
  live: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/sessions',
    access: 'group:read',
    summary: 'Listening sessions going on that the asker may join',
    params: z.object({ groupId: Uuid }),
    response: z.object({ items: z.array(Session) })
  }),
  start: defineRoute({
    method: 'POST',
    path: '/api/takes/:takeId/sessions',
    access: 'take:session',
    summary: 'Open a listening session on a take (the one already open, if there is one)',
    params: z.object({ takeId: Uuid }),
    body: z.object({ id: Uuid }),
    status: 201,
    response: Session
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/sessions/:sessionId',
    access: 'session:join',
    summary: 'One listening session',
    params: SessionParams,
    response: Session
  }),
  end: defineRoute({
    method: 'POST',
    path: '/api/sessions/:sessionId/end',
    access: 'session:end',
    summary: 'Close a listening session',
    params: SessionParams,
    response: Session
  })
}
