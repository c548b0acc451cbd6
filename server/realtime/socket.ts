// One way to answer a socket event: parse, sign-in and access as for a route, the service, always an acknowledgement.
import type { Server as HttpServer } from 'node:http'
import { type DefaultEventsMap, Server, type Socket } from 'socket.io'
import type { z } from 'zod'
import { denial } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import {
  type ClientEvents,
  clientEvents,
  type ClientToServerEvents,
  type ServerToClientEvents
} from '@shared/events/realtime'
import type { Ack } from '@shared/events/define'
import { problem } from '@shared/errors/problems'
import type { Relations } from '@server/access/relations'
import { isOwnOrigin } from '@server/http/guards'
import type { Actor } from '@server/http/handlers'
import { parseInput } from '@server/http/parse'
import { problemOf } from '@server/http/problem'
import type { Logger } from '@server/logger'

export interface SocketData {
  actor: Actor
  sid: string
}
export type Io = Server<ClientToServerEvents, ServerToClientEvents, DefaultEventsMap, SocketData>
export type RoomSocket = Socket<ClientToServerEvents, ServerToClientEvents, DefaultEventsMap, SocketData>

/** Most a message may weigh, bytes: everything here is a few numbers and ids. */
const maxMessageBytes = 16_384
/** All events of one socket together; past it the socket is closed. */
const floodPerSecond = 300

export const createIo = (http: HttpServer): Io =>
  new Server(http, {
    maxHttpBufferSize: maxMessageBytes,
    pingInterval: 10_000,
    pingTimeout: 8_000,
    serveClient: false,
    // A browser always says where a socket comes from; what says nothing carries nobody's cookie by itself (ASVS V4.4.2).
    allowRequest: (req, answer) => {
      const origin = req.headers.origin
      const site = req.headers['sec-fetch-site']
      const isForeign =
        (origin !== undefined && !isOwnOrigin(origin, req.headers.host)) ||
        (site !== undefined && site !== 'same-origin')
      answer(isForeign ? 'foreign origin' : null, !isForeign)
    }
  })

/** Counts in whole seconds: a burst of `perSecond` passes, the next one waits for the next second. */
const createCounter = (now: () => number) => {
  let second = 0
  let counts = new Map<string, number>()
  return (name: string): number => {
    const current = Math.floor(now() / 1000)
    if (current !== second) {
      second = current
      counts = new Map()
    }
    const count = (counts.get(name) ?? 0) + 1
    counts.set(name, count)
    return count
  }
}

export interface EventInput<E extends keyof ClientEvents> {
  socket: RoomSocket
  actor: Actor
  relations: ReadonlySet<Relation>
  payload: z.infer<ClientEvents[E]['payload']>
}
export type EventHandlers = {
  [E in keyof ClientEvents]: (input: EventInput<E>) => Promise<z.infer<ClientEvents[E]['reply']>>
}

interface Deps {
  relations: Relations
  log: Logger
  now(): number
  isSignedIn(sid: string): Promise<boolean>
}

/** Attaches every event of the contract to a new socket. */
export const attach = (
  socket: RoomSocket,
  handlers: EventHandlers,
  { relations, log, now, isSignedIn }: Deps
): void => {
  const count = createCounter(now)
  socket.use((packet, next) => {
    if (count('*') > floodPerSecond) {
      socket.disconnect(true)
      return
    }
    const name = String(packet[0])
    const ack = packet.at(-1) as unknown
    if (!Object.hasOwn(clientEvents, name)) {
      if (typeof ack === 'function')
        (ack as (answer: Ack<never>) => void)({ ok: false, problem: problem('not-found').toBody() })
      return
    }
    next()
  })

  for (const name of Object.keys(clientEvents) as (keyof ClientEvents)[]) {
    const def = clientEvents[name]
    const handler = handlers[name] as (input: EventInput<typeof name>) => Promise<unknown>
    const answer = async (payload: unknown): Promise<unknown> => {
      if (count(name) > def.perSecond) throw problem('too-many')
      // The sign-in may have ended since the handshake (ASVS V4.4.4).
      if (!(await isSignedIn(socket.data.sid))) {
        socket.disconnect(true)
        throw problem('sign-in-needed')
      }
      const parsed = parseInput('body', def.payload, payload)
      const { actor } = socket.data
      const held = await relations.of(actor, def.access, parsed as Record<string, unknown>)
      const refused = denial(def.access, held)
      if (refused) throw problem(refused === 403 ? 'forbidden' : refused === 401 ? 'sign-in-needed' : 'not-found')
      return def.reply.parse(await handler({ socket, actor, relations: held, payload: parsed as never }))
    }
    const listener = (...sent: unknown[]): void => {
      const ack = sent.at(-1)
      const payload = typeof sent[0] === 'function' ? undefined : sent[0]
      const respond = typeof ack === 'function' ? (ack as (a: Ack<unknown>) => void) : () => undefined
      answer(payload).then(
        (data) => respond({ ok: true, data }),
        (error: unknown) => {
          const known = problemOf(error)
          if (!known) log.error('session', 'a socket event failed', error, { event: name })
          respond({ ok: false, problem: (known ?? problem('internal')).toBody() })
        }
      )
    }
    socket.on(name, listener as never)
  }
}
