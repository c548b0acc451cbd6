// One contract per route: the server mounts it, the client calls it, the tests walk it.
import { z } from 'zod'
import type { Permission } from '@shared/access/permissions'

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'

/** json: parsed in, parsed out. upload: multipart through multer. raw: body is a byte stream. stream: answer is bytes. page: not JSON. */
export type RouteKind = 'json' | 'upload' | 'raw' | 'stream' | 'page'

const nothing = z.object({})
export const Empty = z.object({})
type Schema = z.ZodType

export interface RouteDef<
  P extends Schema = Schema,
  Q extends Schema = Schema,
  B extends Schema = Schema,
  R extends Schema = Schema,
  K extends RouteKind = RouteKind
> {
  method: Method
  path: string
  access: Permission
  summary: string
  kind: K
  params: P
  query: Q
  body: B
  status: number
  response: R
  /** upload: the file field and how many bytes it may have. raw: how many bytes the body may have. */
  maxBytes?: number
  fileField?: string
}

interface RouteInput<P extends Schema, Q extends Schema, B extends Schema, R extends Schema, K extends RouteKind> {
  method: Method
  path: string
  access: Permission
  summary: string
  kind?: K
  params?: P
  query?: Q
  body?: B
  status?: number
  response?: R
  maxBytes?: number
  fileField?: string
}

type Nothing = typeof nothing

export const defineRoute = <
  P extends Schema = Nothing,
  Q extends Schema = Nothing,
  B extends Schema = Nothing,
  R extends Schema = Nothing,
  K extends RouteKind = 'json'
>(
  def: RouteInput<P, Q, B, R, K>
): RouteDef<P, Q, B, R, K> => ({
  kind: 'json' as K,
  params: nothing as unknown as P,
  query: nothing as unknown as Q,
  body: nothing as unknown as B,
  response: nothing as unknown as R,
  status: 200,
  ...def
})

export type ParamsOf<D extends RouteDef> = z.infer<D['params']>
export type QueryOf<D extends RouteDef> = z.infer<D['query']>
export type BodyOf<D extends RouteDef> = z.infer<D['body']>
export type ResponseOf<D extends RouteDef> = z.infer<D['response']>

// The type of an empty z.object is Record<string, never>: no field has a name of its own.
type Need<Key extends string, T> = string extends keyof T
  ? { [K in Key]?: undefined }
  : Partial<T> extends T
    ? { [K in Key]?: T }
    : { [K in Key]: T }

/** What a caller hands over: only the parts the route has. */
export type RequestOf<D extends RouteDef> = Need<'params', ParamsOf<D>> &
  Need<'query', QueryOf<D>> &
  Need<'body', BodyOf<D>>

/** The address with its parameters put in and the query appended. */
export const addressOf = (
  def: Pick<RouteDef, 'path'>,
  input: { params?: object | undefined; query?: object | undefined } = {}
): string => {
  const params = (input.params ?? {}) as Record<string, unknown>
  const path = def.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(String(params[name] ?? '')))
  const query = Object.entries(input.query ?? {}).filter(([, value]) => value !== undefined && value !== null)
  if (query.length === 0) return path
  return `${path}?${query.map(([key, value]) => `${encodeURIComponent(key)}=${encodeURIComponent(String(value))}`).join('&')}`
}
