// A browser's socket as one person has it: the sign-in's cookie, acknowledgements as promises.
import { io, type Socket } from 'socket.io-client'
import { onTestFinished } from 'vitest'
import type { z } from 'zod'
import type { Ack } from '@shared/events/define'
import type { ClientEvents, ClientToServerEvents, ServerEvents, ServerToClientEvents } from '@shared/events/realtime'
import type { Person } from './app.ts'

export type TestSocket = Socket<ServerToClientEvents, ClientToServerEvents>

export interface SocketOptions {
  origin?: string | null
  transports?: ('websocket' | 'polling')[]
}

export const socketFor = (url: string, person: Pick<Person, 'cookie'>, options: SocketOptions = {}): TestSocket => {
  const { origin = url, transports = ['websocket'] } = options
  const socket: TestSocket = io(url, {
    transports,
    forceNew: true,
    reconnection: false,
    extraHeaders: { ...(person.cookie ? { Cookie: person.cookie } : {}), ...(origin ? { Origin: origin } : {}) }
  })
  onTestFinished(() => {
    socket.disconnect()
  })
  return socket
}

/** Resolves when it stands; rejects with the server's words. */
export const connected = (socket: TestSocket): Promise<TestSocket> =>
  new Promise((done, fail) => {
    if (socket.connected) return done(socket)
    socket.once('connect', () => done(socket))
    socket.once('connect_error', fail)
  })

const patienceMs = 10_000

export const ask = async <E extends keyof ClientEvents>(
  socket: TestSocket,
  event: E,
  payload: unknown
): Promise<Ack<z.infer<ClientEvents[E]['reply']>>> => {
  const loose = socket.timeout(patienceMs) as unknown as {
    emitWithAck(event: string, payload: unknown): Promise<unknown>
  }
  return (await loose.emitWithAck(event, payload)) as Ack<z.infer<ClientEvents[E]['reply']>>
}

/** The acknowledgement's status: 200, or the problem's. */
export const statusOf = (answer: Ack<unknown>): number => (answer.ok ? 200 : answer.problem.status)

/** Everything that arrives under one name, from now on. */
export const collect = <E extends keyof ServerEvents>(socket: TestSocket, event: E): z.infer<ServerEvents[E]>[] => {
  const seen: z.infer<ServerEvents[E]>[] = []
  socket.on(event, ((payload: z.infer<ServerEvents[E]>) => seen.push(payload)) as never)
  return seen
}

/** Waits until it holds; fails when it still does not after a generous time. */
export const until = async (holds: () => boolean | Promise<boolean>, what = 'it'): Promise<void> => {
  const end = Date.now() + patienceMs
  while (!(await holds())) {
    if (Date.now() > end) throw new Error(`waited in vain for ${what}`)
    await new Promise((again) => setTimeout(again, 20))
  }
}
