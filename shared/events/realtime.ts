// Every socket event, in three classes: durable (announced by group sequence), session state (the server's, re-sent whole
// on every join), volatile (pointing, throttled, may be lost).
import { z } from 'zod'
import { Seconds, Uuid } from '@shared/contracts/common'
import { GroupEvent } from '@shared/contracts/group-events'
import { Session, TransportState } from '@shared/contracts/sessions'
import { type ClientToServer, defineEvent, type ServerToClient } from '@shared/events/define'

const Span = z.object({ startSec: Seconds, endSec: Seconds })
const inSession = { sessionId: Uuid }
const None = z.object({})

/** The change of the shared transport that the leader asks for; what is left out stays. */
export const TransportChange = z.object({
  ...inSession,
  positionSec: Seconds.optional(),
  playing: z.boolean().optional(),
  rate: z.number().min(0.2).max(1.5).optional(),
  semitones: z.number().min(-12).max(24).optional(),
  loop: Span.refine((s) => s.endSec > s.startSec, 'A loop needs a length.')
    .nullable()
    .optional()
})

export const clientEvents = {
  /** Follow what happens in a group; the answer tells the sequence number to catch up from. */
  'group:follow': defineEvent({
    access: 'group:events',
    payload: z.object({ groupId: Uuid }),
    reply: z.object({ lastSeq: z.number().int() }),
    perSecond: 20
  }),
  'group:unfollow': defineEvent({
    access: 'group:events',
    payload: z.object({ groupId: Uuid }),
    reply: None,
    perSecond: 20
  }),
  /** Server time for the clock estimate (ms since 1970). */
  'clock:ask': defineEvent({
    access: 'account:own',
    payload: None,
    reply: z.object({ serverMs: z.number() }),
    perSecond: 20
  }),
  'session:join': defineEvent({ access: 'session:join', payload: z.object(inSession), reply: Session, perSecond: 5 }),
  'session:leave': defineEvent({ access: 'session:join', payload: z.object(inSession), reply: None, perSecond: 5 }),
  /** Step away from the shared playhead, or back to it. */
  'session:step': defineEvent({
    access: 'session:join',
    payload: z.object({ ...inSession, isAway: z.boolean() }),
    reply: None,
    perSecond: 5
  }),
  /** Hand the lead to somebody (the leader, or who may end the session), or take it when nobody who leads is here. */
  'session:lead': defineEvent({
    access: 'session:steer',
    payload: z.object({ ...inSession, leaderId: Uuid }),
    reply: Session,
    perSecond: 5
  }),
  'transport:change': defineEvent({
    access: 'session:steer',
    payload: TransportChange,
    reply: TransportState,
    perSecond: 20
  }),
  /** Point at a bar or show one's selection to everyone in the session. */
  'pointer:show': defineEvent({
    access: 'session:join',
    payload: z.object({ ...inSession, span: Span.nullable() }),
    reply: None,
    perSecond: 15
  })
}

export const serverEvents = {
  'group:event': GroupEvent,
  /** Rights were lost: the socket has been taken out of the group's room. */
  'group:closed': z.object({ groupId: Uuid }),
  'take:progress': z.object({ takeId: Uuid, stage: z.string(), progress: z.number() }),
  /** The whole session again; what the asker may do in it came with their own join. */
  'session:state': Session.omit({ abilities: true }),
  'transport:state': TransportState.extend(inSession),
  'pointer:shown': z.object({ ...inSession, personId: Uuid, span: Span.nullable() }),
  'signIn:ended': None
}

export type ClientEvents = typeof clientEvents
export type ServerEvents = typeof serverEvents
export type ClientToServerEvents = ClientToServer<ClientEvents>
export type ServerToClientEvents = ServerToClient<ServerEvents>
