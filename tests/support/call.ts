// Calls a route by its contract: what is sent and what comes back is typed by it.
import type { Response } from 'supertest'
import { addressOf, type RequestOf, type ResponseOf, type RouteDef } from '@shared/contracts/route'
import type { ProblemBody } from '@shared/errors/problems'
import type { Method, Person } from './app.ts'

export interface Called<D extends RouteDef> {
  status: number
  /** The answer, where it was the one that the contract promises. */
  body: ResponseOf<D>
  problem: ProblemBody
  response: Response
}

export const callRoute = async <D extends RouteDef>(
  person: Person,
  def: D,
  input: RequestOf<D>
): Promise<Called<D>> => {
  const { params, query, body } = input as { params?: object; query?: object; body?: object }
  const test = person.send(def.method.toLowerCase() as Method, addressOf(def, { params, query }))
  const response = await (body === undefined ? test : test.send(body))
  return {
    status: response.status,
    body: response.body as ResponseOf<D>,
    problem: response.body as ProblemBody,
    response
  }
}

/** As callRoute, for what has to succeed: the answer alone. */
export const must = async <D extends RouteDef>(person: Person, def: D, input: RequestOf<D>): Promise<ResponseOf<D>> => {
  const called = await callRoute(person, def, input)
  if (called.status !== def.status)
    throw new Error(`${def.method} ${def.path}: ${called.status} ${called.response.text}`)
  return called.body
}
