// One call for every contract route: typed request, parsed answer, problems as ApiProblem.
import { addressOf, type RequestOf, type ResponseOf, type RouteDef } from '@shared/contracts/route'
import { codeOfType, ProblemBody, type ProblemCode, type ProblemField } from '@shared/errors/problems'
import { env } from '@client/lib/env'

export class ApiProblem extends Error {
  readonly code: ProblemCode | 'offline'
  readonly status: number
  readonly fields: ProblemField[]
  readonly body: ProblemBody | null

  constructor(code: ProblemCode | 'offline', message: string, body: ProblemBody | null) {
    super(message)
    this.name = 'ApiProblem'
    this.code = code
    this.status = body?.status ?? 0
    this.fields = body?.errors ?? []
    this.body = body
  }
}

export const offlineProblem = (): ApiProblem =>
  new ApiProblem('offline', 'The server cannot be reached. What you did is kept here and sent again.', null)

/** What an answer that is not a success says, or the nearest thing to it. */
export const problemOf = (status: number, text: string): ApiProblem => {
  try {
    const body = ProblemBody.parse(JSON.parse(text))
    return new ApiProblem(codeOfType(body.type) ?? 'internal', body.detail ?? body.title, body)
  } catch {
    // A proxy in between answered in its own words.
    return status === 413
      ? new ApiProblem('too-large', 'That is larger than may be sent.', null)
      : new ApiProblem(
          status >= 500 ? 'unavailable' : 'internal',
          'The server gave an answer that could not be read.',
          null
        )
  }
}

export const parseAnswer = <D extends RouteDef>(def: D, data: unknown): ResponseOf<D> =>
  (env.isChecked ? def.response.parse(data) : data) as ResponseOf<D>

export const callRoute = async <D extends RouteDef>(
  def: D,
  request: RequestOf<D>,
  signal?: AbortSignal
): Promise<ResponseOf<D>> => {
  const hasBody = def.method !== 'GET'
  let response: Response
  try {
    response = await fetch(addressOf(def, request as { params?: object; query?: object }), {
      method: def.method,
      credentials: 'same-origin',
      ...(hasBody ? { headers: { 'Content-Type': 'application/json' }, body: JSON.stringify(request.body ?? {}) } : {}),
      ...(signal ? { signal } : {})
    })
  } catch (error) {
    if (signal?.aborted) throw error
    throw offlineProblem()
  }
  const text = await response.text()
  if (!response.ok) throw problemOf(response.status, text)
  return parseAnswer(def, JSON.parse(text))
}
