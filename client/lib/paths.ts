// Every address of the application and its builder, once.
export const routes = {
  home: '/',
  signIn: '/sign-in',
  signUp: '/sign-up',
  invitation: '/join',
  account: '/account',
  group: '/groups/:groupId',
  people: '/groups/:groupId/people',
  tune: '/tunes/:tuneId',
  take: '/takes/:takeId',
  help: '/help',
  kit: '/kit'
} as const

const fill = (path: string, params: Record<string, string>): string =>
  path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name] ?? ''))

/** Where on the desk: a span of bars through the take, or within a pass of the form; a comment; a speed in percent. */
export interface DeskPlace {
  /** `49-52` or `49`: counted through the take, or in the form when `pass` is given. */
  bars?: string
  pass?: number
  /** Free span in seconds, `12.5-20.25`, where there are no bars. */
  at?: string
  comment?: string
  speed?: number
  session?: string
}

export const paths = {
  home: (): string => routes.home,
  signIn: (next?: string): string => (next ? `${routes.signIn}?next=${encodeURIComponent(next)}` : routes.signIn),
  signUp: (): string => routes.signUp,
  /** The token stands behind # so that it never reaches a log or a Referer (ASVS V14.2.1). */
  invitation: (token: string): string => `${routes.invitation}#${token}`,
  account: (): string => routes.account,
  group: (groupId: string): string => fill(routes.group, { groupId }),
  people: (groupId: string): string => fill(routes.people, { groupId }),
  tune: (tuneId: string): string => fill(routes.tune, { tuneId }),
  help: (): string => routes.help,
  take: (takeId: string, place: DeskPlace = {}): string => {
    const query = new URLSearchParams(
      Object.entries(place).flatMap(([key, value]) => (value === undefined ? [] : [[key, String(value)]]))
    )
    const text = query.toString()
    return fill(routes.take, { takeId }) + (text ? `?${text}` : '')
  }
}
