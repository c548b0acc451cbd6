// The shape of handlers: input already parsed and allowed, no req or res.
import type { Relation } from '@shared/access/relations'
import type { BodyOf, ParamsOf, QueryOf, ResponseOf, RouteDef } from '@shared/contracts/route'

export interface Actor {
  id: string
  name: string
  isOperator: boolean
}

/** Who asks and from where: for the audit log and for the origin of an edit. */
export interface Asker {
  address: string
  requestId: string
  signInId: string | null
}

export interface UploadedFile {
  path: string
  bytes: number
}

/** What a stream route answers with: a file of the storage, sent with ranges and ETag. */
export interface FileAnswer {
  file: string
  mime: string
  /** Given for downloads: the name to offer, made safe by the mount (RFC 6266). */
  downloadName?: string
  /** How long a browser may keep it without asking again, seconds. */
  maxAgeSec?: number
}

/** Lets a handler begin or end the browser's sign-in without seeing the request. */
export interface SignInControl {
  /** The person behind an e-mail and password (passport-local), or null. */
  check(email: string, password: string): Promise<Actor | null>
  begin(userId: string): Promise<void>
  end(): Promise<void>
}

interface Common<D extends RouteDef> {
  params: ParamsOf<D>
  query: QueryOf<D>
  body: BodyOf<D>
  relations: ReadonlySet<Relation>
  asker: Asker
  signIn: SignInControl
}

type ActorOf<D extends RouteDef> = D['access'] extends 'site:visit' | 'account:open' | 'invitation:look'
  ? Actor | null
  : Actor

type Extra<D extends RouteDef> = D['kind'] extends 'upload'
  ? { file: UploadedFile }
  : D['kind'] extends 'raw'
    ? { bytes: AsyncIterable<Buffer> }
    : object

export type Input<D extends RouteDef> = Common<D> & { actor: ActorOf<D> } & Extra<D>
type Output<D extends RouteDef> = D['kind'] extends 'stream' ? FileAnswer : ResponseOf<D>

export type Handler<D extends RouteDef> = (input: Input<D>) => Promise<Output<D>> | Output<D>
/** One handler for every route that is not a page. */
export type Handlers<R extends Record<string, RouteDef>> = {
  [K in keyof R as R[K]['kind'] extends 'page' ? never : K]: Handler<R[K]>
}
