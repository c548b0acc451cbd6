// The one socket of the page: typed by the event contract, connected while somebody is signed in.
import { io, type Socket } from 'socket.io-client'
import type { z } from 'zod'
import type { Ack } from '@shared/events/define'
import type { ClientEvents, ClientToServerEvents, ServerToClientEvents } from '@shared/events/realtime'
import { codeOfType } from '@shared/errors/problems'
import { ApiProblem, offlineProblem } from '@client/lib/api'

export type RoomSocket = Socket<ServerToClientEvents, ClientToServerEvents>

/** An answer that has not come by then is taken as lost, ms. */
const answerWithinMs = 6000

let shared: RoomSocket | null = null

/** The page's socket; made on first use. */
export const roomSocket = (): RoomSocket => {
  shared ??= io({
    autoConnect: false,
    transports: ['websocket', 'polling'],
    reconnectionDelay: 300,
    reconnectionDelayMax: 3000
  })
  return shared
}

/** Hangs up; the next connection is a new handshake with whoever is signed in then. What listens to the socket stays. */
export const closeSocket = (): void => {
  if (!shared) return
  shared.disconnect()
  // What one person had not sent yet is not said in the next one's name.
  shared.sendBuffer.length = 0
}

/** Sends an event and waits for its acknowledgement; throws ApiProblem. */
export const ask = async <E extends keyof ClientEvents>(
  event: E,
  payload: z.infer<ClientEvents[E]['payload']>
): Promise<z.infer<ClientEvents[E]['reply']>> => {
  const socket = roomSocket()
  let answer: Ack<z.infer<ClientEvents[E]['reply']>>
  try {
    const send = socket.timeout(answerWithinMs) as unknown as {
      emitWithAck(name: string, data: unknown): Promise<typeof answer>
    }
    answer = await send.emitWithAck(event, payload)
  } catch {
    throw offlineProblem()
  }
  if (answer.ok) return answer.data
  const { problem } = answer
  throw new ApiProblem(codeOfType(problem.type) ?? 'internal', problem.detail ?? problem.title, problem)
}
