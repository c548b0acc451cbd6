// ASVS V8.2.1, V8.2.2, V8.3.1 (trust.md 14): every route x everybody x own and foreign things, over HTTP on the real database.
import type { Router } from 'express'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { definitionOf } from '@shared/access/permissions'
import { allRoutes } from '@shared/contracts/registry'
import { addressOf, type RouteDef } from '@shared/contracts/route'
import { expected } from '../support/access-table.ts'
import { type Method, type Person, startApp, type TestApp } from '../support/app.ts'
import { buildGroup, buildInvitation, clipSettings, newId } from '../support/build.ts'
import { makeRecording, scratchFolder, sine } from '../support/media.ts'
import { type AskerKey, askerKeys, emailOf, idOf, password } from '../support/people.ts'
import { type Ids, missing, relationsTo, targetCases, type TargetKind } from '../support/world.ts'
import { readFileSync } from 'node:fs'

interface Row {
  /** Ids that the path has beside the thing itself. */
  also?: Ids
  query?: object
  body?: (asker: AskerKey, ids: Ids) => object | Promise<object>
  /** Changes or removes the thing, so that everybody needs one of their own. */
  isSpent?: true
  /** Ends the sign-in that asks, so that everybody asks with one of their own. */
  endsSignIn?: true
  /** Answers of those who are let in, where they are not the contract's own. */
  status?: (asker: AskerKey, label: string) => number | undefined
  send?: (person: Person, path: string, body: object) => Promise<number>
}

let app: TestApp
let recording: Buffer
let folder: string
beforeAll(async () => {
  app = await startApp({ bounds: { clipsUnderWay: 1000, clipsPerPerson: 1000 } })
})
afterAll(() => app?.close())

const one = (): { id: string } => ({ id: newId() })
const span = { startSec: 1, endSec: 2 }
const needsMedia = (_: AskerKey, label: string) => (label.includes('of ines for the group') ? undefined : 404)
const bars = { baseRevision: 0, operations: [{ kind: 'setMark', mark: { bar: 1, formBar: 1, newPass: true } }] }
const chart = { baseRevision: 0, operations: [{ kind: 'setKey', key: 'G minor' }] }

/** One row a route. A route without a row fails the test below. */
const rows: Record<string, Row> = {
  'site.health': {},
  'site.openapi': {},
  'site.app': {},
  'account.me': {},
  'account.update': { body: () => ({ tapLagMs: 12 }) },
  'preferences.get': {},
  'preferences.change': { body: () => ({ volume: 0.4 }) },
  'account.signUp': {
    endsSignIn: true,
    body: (asker) => ({
      ...one(),
      name: 'New Person',
      email: `${newId()}@${asker}.example`,
      password: 'a long enough password',
      group: { ...one(), name: 'A new group' }
    })
  },
  'account.signIn': {
    endsSignIn: true,
    body: (asker) => ({ email: emailOf(asker === 'anonymous' ? 'ines' : asker), password })
  },
  'account.signOut': { endsSignIn: true },
  'account.password': { body: () => ({ current: 'not this one', next: 'another long password' }), status: () => 422 },
  'groups.list': {},
  'groups.create': { body: () => ({ ...one(), name: 'Another group' }) },
  'groups.get': {},
  'groups.update': { body: () => ({ isRosterShown: true }) },
  'groups.people': {},
  'groups.setRole': {
    isSpent: true,
    also: { userId: idOf('tomas') },
    body: () => ({ role: 'listener' }),
    status: (_, label) => (label.includes('next door') ? 404 : undefined)
  },
  'groups.removePerson': {
    isSpent: true,
    also: { userId: idOf('tomas') },
    status: (_, label) => (label.includes('next door') ? 404 : undefined)
  },
  // Who owns a group alone cannot leave it.
  'groups.leave': { isSpent: true, status: (asker) => (asker === 'mara' || asker === 'stranger' ? 409 : undefined) },
  'invitations.list': {},
  'invitations.create': { body: () => ({ ...one(), role: 'member', note: '' }) },
  'invitations.revoke': { isSpent: true },
  'invitations.look': { body: async () => ({ token: (await buildInvitation(app)).token }) },
  'invitations.accept': {
    body: async (asker) => {
      const groupId = await buildGroup(app, asker === 'jory' ? { mara: 'owner', jory: 'member' } : { mara: 'owner' })
      return { token: (await buildInvitation(app, { groupId })).token }
    },
    // mara and jory are in that group already.
    status: (asker) => (asker === 'mara' || asker === 'jory' ? 409 : undefined)
  },
  'links.list': {},
  // Anybody asks for a link with themselves in it; mara and jory are those who teach.
  'links.create': {
    isSpent: true,
    body: (asker) =>
      asker === 'anonymous' || asker === 'sten'
        ? { ...one(), teacherId: idOf('mara'), studentId: idOf('ines') }
        : asker === 'stranger' || asker === 'neighbour'
          ? { ...one(), teacherId: idOf('stranger'), studentId: idOf('neighbour') }
          : asker === 'mara'
            ? { ...one(), teacherId: idOf('mara'), studentId: idOf('pell') }
            : {
                ...one(),
                teacherId: idOf(asker === 'jory' ? 'jory' : 'mara'),
                studentId: idOf(asker === 'jory' ? 'wren' : asker)
              }
  },
  'links.agree': { isSpent: true },
  'links.end': { isSpent: true },
  'groupEvents.list': { query: { after: '0' } },
  'tunes.list': {},
  'tunes.create': { body: () => ({ ...one(), title: 'Ferry Money' }) },
  'tunes.get': {},
  'tunes.update': { body: () => ({ title: 'Quay Lantern' }) },
  'tunes.remove': { isSpent: true },
  'charts.get': {},
  'charts.edit': { isSpent: true, body: () => ({ ...one(), ...chart }) },
  'charts.undo': { body: one, status: () => 409 },
  'charts.redo': { body: one, status: () => 409 },
  'takes.list': {},
  'takes.upload': {
    send: async (person, path) =>
      (
        await person
          .send('post', path)
          .field({ id: newId(), title: 'Uploaded', reach: 'group', agreed: 'yes' })
          .attach('recording', recording, 'a.wav')
      ).status
  },
  'takes.get': {},
  'takes.update': { body: () => ({ title: 'Third chorus' }) },
  'takes.remove': { isSpent: true },
  'takes.retry': {},
  'takes.audio': { status: needsMedia },
  'takes.original': { status: needsMedia },
  'takes.peaks': { status: needsMedia },
  'takes.pieces': {},
  'takes.piece': {
    also: { index: '0' },
    status: needsMedia
  },
  'recordings.start': { body: () => ({ ...one(), mime: 'audio/webm' }) },
  'recordings.piece': {
    isSpent: true,
    also: { index: '0' },
    send: async (person, path) =>
      (await person.send('put', path).set('Content-Type', 'application/octet-stream').send(Buffer.from('piece'))).status
  },
  // Nothing has arrived yet: the number of pieces does not fit.
  'recordings.finish': {
    body: () => ({ ...one(), title: 'Made here', reach: 'group', agreed: 'yes', pieces: 3 }),
    status: () => 409
  },
  'recordings.drop': { isSpent: true },
  'barMaps.get': {},
  'barMaps.edit': { isSpent: true, body: () => ({ ...one(), ...bars }) },
  'barMaps.undo': { body: one, status: () => 409 },
  'barMaps.redo': { body: one, status: () => 409 },
  'comments.list': {},
  'comments.create': { body: () => ({ ...one(), kind: 'question', text: 'Which finger?', ...span }) },
  'comments.update': { body: () => ({ text: 'Which hand?' }) },
  'comments.remove': { isSpent: true },
  'comments.settle': { body: () => ({ isOpen: false }) },
  'comments.reply': { body: () => ({ ...one(), text: 'The second.' }) },
  'comments.updateReply': { body: () => ({ text: 'The third.' }) },
  'comments.removeReply': { isSpent: true },
  'savedLoops.list': {},
  'savedLoops.create': {
    body: () => ({ ...one(), name: 'The turnaround', span, rate: 0.5, ladder: null, restBeats: 0 })
  },
  'savedLoops.change': { body: () => ({ name: 'The last four' }) },
  'savedLoops.remove': { isSpent: true },
  'clips.list': {},
  'clips.create': { body: () => ({ ...one(), place: null, settings: clipSettings() }) },
  'clips.get': {},
  'clips.file': {},
  'clips.remove': { isSpent: true },
  'sessions.live': {},
  'sessions.start': { body: one },
  'sessions.get': {},
  'sessions.end': { body: () => ({}) }
}

const request = async (def: RouteDef, row: Row, person: Person, ids: Ids): Promise<number> => {
  const path = addressOf(def, { params: { ...ids, ...row.also }, query: row.query }).replace('{*path}', 'takes/any')
  const body = (await row.body?.(person.key, ids)) ?? {}
  if (row.send) return row.send(person, path, body)
  const test = person.send(def.method.toLowerCase() as Method, path)
  return (await (row.body ? test.send(body) : test)).status
}

describe('the access matrix of routes', () => {
  it('has a row for every route, and no row without one', () => {
    expect(Object.keys(rows).sort()).toEqual(
      allRoutes()
        .map(({ name }) => name)
        .sort()
    )
  })

  it('finds nothing mounted that is not in the registry', () => {
    const served: string[] = []
    const middleware: string[] = []
    const walk = (router: Router): void => {
      for (const layer of router.stack) {
        const nested = (layer.handle as unknown as { stack?: unknown }).stack
        if (layer.route) {
          const methods = (layer.route as unknown as { methods: Record<string, boolean> }).methods
          for (const method of Object.keys(methods)) served.push(`${method.toUpperCase()} ${layer.route.path}`)
        } else if (nested) walk(layer.handle as unknown as Router)
        else middleware.push(layer.name)
      }
    }
    walk(app.app.router as unknown as Router)
    walk(app.api)
    const promised = allRoutes().map(({ def }) => `${def.method} ${def.path}`)
    // The one that says 404 to whatever else begins with /api.
    const catchAll = served.filter((route) => route.endsWith(' /api/{*path}'))
    expect(served.filter((route) => !catchAll.includes(route)).sort()).toEqual(promised.sort())
    // Handlers without a path of their own would not show above: each of these is known (without a name: one header
    // more, the way to everything under /api, the last word on failures).
    expect(middleware.sort()).toEqual([
      '<anonymous>',
      '<anonymous>',
      '<anonymous>',
      'authenticate',
      'builtFiles',
      'compression',
      'expire',
      'general',
      'helmetMiddleware',
      'initialize',
      'keepAlive',
      'requestId',
      'sameOrigin',
      'session'
    ])
  })

  const figures = { routes: new Set<string>(), requests: 0 }
  for (const { name, def } of allRoutes()) {
    it(`holds for ${name}`, { timeout: 120_000 }, async () => {
      const row = rows[name]
      if (!row) throw new Error(`${name} has no row`)
      if (!recording) {
        folder = scratchFolder()
        recording = readFileSync(makeRecording(folder, 'a.wav', sine(110, 0.5, 8000)))
      }
      const kind: TargetKind = definitionOf(def.access).resource
      const cases = targetCases(app)[kind]
      const wrong: string[] = []
      const check = async (person: Person, ids: Ids, label: string, relations: ReturnType<typeof relationsTo>) => {
        const verdict = expected(def.access, relations)
        const wanted = verdict === 'allowed' ? (row.status?.(person.key, label) ?? def.status) : verdict
        const status = await request(def, row, person, ids)
        figures.requests += 1
        if (status !== wanted) wrong.push(`${person.key} on ${label}: ${status} instead of ${wanted}`)
      }
      for (const target of cases) {
        const shared = await target.make()
        await Promise.all(
          askerKeys.map(async (key) => {
            const relations = relationsTo(target.standing, key)
            const isSpent = row.isSpent && expected(def.access, relations) === 'allowed'
            const person = row.endsSignIn && key !== 'anonymous' ? await app.signInAgain(key) : await app.as(key)
            await check(person, isSpent ? await target.make() : shared, target.label, relations)
          })
        )
      }
      if (kind !== 'site')
        for (const target of missing(kind))
          await Promise.all(
            askerKeys.map(async (key) =>
              check(await app.as(key), target.ids, `a ${kind} ${target.label}`, relationsTo(target.standing, key))
            )
          )
      expect(wrong).toEqual([])
      figures.routes.add(name)
    })
  }

  it('asked every route as everybody', () => {
    expect(figures.routes.size).toBe(allRoutes().length)
    expect(figures.requests).toBeGreaterThan(allRoutes().length * askerKeys.length)
    process.stdout.write(
      `access matrix: ${figures.routes.size} routes, ${askerKeys.length} askers, ${figures.requests} requests\n`
    )
  })

  it('answered nothing with an error of ours', () => {
    expect(app.logs.errors()).toEqual([])
  })
})
