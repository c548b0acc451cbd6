// Serves a noun's routes in one order: sign-in, params, relations, access, query and body, handler, response.
import express, { type IRouter, type Request, type RequestHandler, type Response } from 'express'
import { denial } from '@shared/access/permissions'
import type { RouteDef } from '@shared/contracts/route'
import { problem } from '@shared/errors/problems'
import { limits } from '@shared/limits'
import type { Relations } from '@server/access/relations'
import type { Actor, Asker, FileAnswer, Handlers, UploadedFile } from '@server/http/handlers'
import { parseInput } from '@server/http/parse'
import { sendFileAnswer } from '@server/http/send-file'
import type { SignIn } from '@server/http/sign-in'
import type { Receiver } from '@server/http/receive-upload'

export interface MountDeps {
  relations: Relations
  receive: Receiver
  signIn: Pick<SignIn, 'control'>
  /** Told of every refusal of somebody who is signed in (ASVS V16.3.2). */
  denied(actor: Actor, def: RouteDef, asker: Asker): Promise<void>
}

const parseJson = express.json({ limit: limits.jsonBytes, strict: true })
const run = (handler: RequestHandler, req: Request, res: Response): Promise<void> =>
  new Promise((done, fail) => {
    handler(req, res, (error?: unknown) => (error ? fail(error) : done()))
  })

async function* bytesOf(req: Request, max: number): AsyncIterable<Buffer> {
  let seen = 0
  // Left in the middle, the request must stay open for the answer.
  for await (const chunk of req.iterator({ destroyOnReturn: false })) {
    seen += (chunk as Buffer).length
    if (seen > max) throw problem('too-large')
    yield chunk as Buffer
  }
}

/** Mounts every route of `defs` with its handler. */
export const mount =
  ({ relations, receive, signIn, denied }: MountDeps) =>
  <R extends Record<string, RouteDef>>(router: IRouter, defs: R, handlers: Handlers<R>): void => {
    for (const [name, def] of Object.entries(defs)) {
      if (def.kind === 'page') continue
      const handler = handlers[name as keyof Handlers<R>] as (input: unknown) => unknown
      const method = def.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete'
      router[method](def.path, async (req: Request, res: Response) => {
        const actor = (req.user as Actor | undefined) ?? null
        const held = await relations.of(actor, def.access, req.params as Record<string, string>)
        const asker = {
          address: req.ip ?? '',
          requestId: String(res.locals.requestId),
          signInId: req.sessionID ?? null
        }
        const refused = denial(def.access, held)
        if (refused === 401) throw problem('sign-in-needed')
        if (refused && actor) await denied(actor, def, asker)
        // Ids that are no ids are simply nowhere: checked before rights are told, so that both look alike.
        const params = def.params.safeParse(req.params)
        if (!params.success || refused === 404) throw problem('not-found')
        if (refused === 403) throw problem('forbidden')
        const query = parseInput('query', def.query, req.query)
        const input = { actor, relations: held, params: params.data, query, asker, signIn: signIn.control(req) }
        if (def.kind === 'upload') {
          const upload = await receive(req, res, def)
          let answered = false
          try {
            const body = parseInput('body', def.body, upload.fields)
            const answer = await handler({ ...input, body, file: upload.file satisfies UploadedFile })
            answered = true
            res.status(def.status).set('Cache-Control', 'no-store').json(def.response.parse(answer))
          } finally {
            await upload.discard(answered)
          }
          return
        }
        if (def.kind === 'stream') {
          const answer = (await handler({ ...input, body: {} })) as FileAnswer
          await sendFileAnswer(req, res, answer)
          return
        }
        if (def.kind === 'raw') {
          const answer = await handler({ ...input, body: {}, bytes: bytesOf(req, def.maxBytes ?? limits.jsonBytes) })
          res.status(def.status).set('Cache-Control', 'no-store').json(def.response.parse(answer))
          return
        }
        if (def.method !== 'GET') await run(parseJson, req, res)
        const body = def.method === 'GET' ? {} : parseInput('body', def.body, req.body ?? {})
        const answer = await handler({ ...input, body })
        res
          .status(def.status)
          .set('Cache-Control', 'no-store')
          .json(def.response.parse(answer ?? {}))
      })
    }
  }
