import { paths, routes } from '@client/lib/paths'

const base = 'https://own.invalid'
const entrances: readonly string[] = [routes.signIn, routes.signUp]

/** Where to go after signing in: an address of this application, else home. Foreign ones are dropped (ASVS V3.7.2). */
export const ownPath = (next: string | null): string => {
  if (!next?.startsWith('/') || !URL.canParse(next, base)) return paths.home()
  const { origin, pathname, search, hash } = new URL(next, base)
  // `/.//host` keeps the origin while it is read, and names another host when it is gone to.
  if (origin !== base || pathname.startsWith('//') || entrances.includes(pathname)) return paths.home()
  return pathname + search + hash
}
