// Anything at all sent to every route and event: an answer of ours, never an error of ours (ASVS V1.2.4, V16.5.1; trust.md 26, 28, 29, 41).
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { allRoutes } from '@shared/contracts/registry'
import { addressOf } from '@shared/contracts/route'
import { ProblemBody } from '@shared/errors/problems'
import { type Method, type Person, startApp, type TestApp } from '../support/app.ts'
import {
  buildClip,
  buildComment,
  buildGroup,
  buildInvitation,
  buildLink,
  buildRecording,
  buildReply,
  buildSavedLoop,
  buildSession,
  buildTake,
  buildTune,
  newId
} from '../support/build.ts'
import { idOf } from '../support/people.ts'

let app: TestApp
let mara: Person
let ids: Record<string, string>
beforeAll(async () => {
  app = await startApp()
  mara = await app.signInAgain('mara')
  const groupId = await buildGroup(app)
  const takeId = await buildTake(app, { groupId, by: 'mara' })
  const commentId = await buildComment(app, { takeId, by: 'mara' })
  ids = {
    groupId,
    takeId,
    commentId,
    replyId: await buildReply(app, { commentId, by: 'mara' }),
    clipId: await buildClip(app, { takeId, by: 'mara' }),
    savedLoopId: await buildSavedLoop(app, { takeId, by: 'mara' }),
    tuneId: await buildTune(app, { groupId, by: 'mara' }),
    sessionId: await buildSession(app, { takeId, groupId, by: 'mara' }),
    invitationId: (await buildInvitation(app, { groupId })).id,
    linkId: await buildLink(app, { groupId, teacher: 'mara', student: 'pell' }),
    recordingId: await buildRecording(app, { groupId, by: 'mara' }),
    userId: idOf('pell'),
    index: '0'
  }
})
afterAll(() => app?.close())

const nasty = fc.constantFrom(
  "' or 1=1 --",
  "'); drop table takes; --",
  '$1 ? :user ?? \\',
  '%00',
  '\0',
  '\ud800',
  '../../../etc/passwd',
  '${7*7}{{7*7}}',
  '<img src=x onerror=1>',
  'é'.repeat(500),
  '1e999',
  'NaN',
  '-0',
  '9'.repeat(30),
  '2026-13-45T99:99:99Z'
)
const text = fc.oneof(nasty, fc.string({ unit: 'binary', maxLength: 60 }))
const id = fc.oneof(fc.constant(null).map(newId), nasty)
const leaf = fc.oneof(text, fc.double(), fc.integer(), fc.boolean(), fc.constant(null), id)
/** Keys that the contracts know, so that the fuzz gets past the first look. */
const key = fc.constantFrom(
  'id',
  'name',
  'title',
  'text',
  'kind',
  'startSec',
  'endSec',
  'role',
  'email',
  'password',
  'token',
  'operations',
  'baseRevision',
  'chart',
  'reach',
  'namedIds',
  'span',
  'isOpen',
  'note',
  'mime',
  'pieces',
  'tapLagMs',
  'keys',
  'volume',
  'ladder',
  'restBeats',
  '__proto__',
  'constructor',
  'toString'
)
const value = fc.letrec((tie) => ({
  any: fc.oneof(
    { maxDepth: 3 },
    leaf,
    fc.array(tie('any'), { maxLength: 3 }),
    fc.dictionary(key, tie('any'), { maxKeys: 4 })
  )
})).any
/** Bodies that nearly fit: the right keys with text that is hard to keep. */
const nearly = fc.record({
  id: fc.constant(null).map(newId),
  title: text,
  name: text,
  text,
  kind: fc.constantFrom('question', 'good', 'setKey'),
  startSec: fc.oneof(fc.double(), fc.constant(0)),
  endSec: fc.oneof(fc.double(), fc.constant(1)),
  role: fc.constantFrom('member', 'listener'),
  note: text,
  mime: text,
  email: text,
  password: text,
  token: fc.string({ minLength: 20, maxLength: 60 }),
  current: text,
  next: text,
  reach: fc.constantFrom('group', 'only me'),
  agreed: fc.constant('yes'),
  pieces: fc.nat(3),
  isOpen: fc.boolean(),
  rate: fc.constantFrom(null, 1),
  ladder: fc.constant(null),
  restBeats: fc.nat(70),
  baseRevision: fc.nat(3),
  teacherId: fc.constant(null).map(() => idOf('mara')),
  studentId: id,
  operations: fc.array(
    fc.oneof(
      fc.record({ kind: fc.constant('setKey'), key: text }),
      fc.record({ kind: fc.constant('setBar'), sectionId: text, index: fc.nat(3), text }),
      fc.record({
        kind: fc.constant('addSection'),
        section: fc.record({ id: text, name: text, bars: fc.array(text, { maxLength: 3 }) }),
        at: fc.nat(2)
      }),
      fc.record({
        kind: fc.constant('setAnchor'),
        anchor: fc.record({
          id: text,
          sec: fc.double({ min: -10, max: 99 }),
          position: fc.record({
            bar: fc.integer({ min: -3, max: 9 }),
            beat: fc.record({ n: fc.integer(), d: fc.integer() })
          })
        })
      })
    ),
    { maxLength: 3 }
  )
})

/** These end what the fuzz stands on. */
const spared = new Set(['account.signOut', 'groups.leave', 'account.password'])

describe.each(allRoutes().filter(({ name }) => !spared.has(name)))('$name', ({ def }) => {
  it('answers anything with an answer of ours', { timeout: 60_000 }, async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.oneof(value, nearly),
        fc.dictionary(fc.constantFrom('after', 'cursor', 'tuneId', 'limit'), text),
        fc.option(text, { freq: 5 }),
        async (body, query, wrongId) => {
          const params = new Proxy(ids, { get: (known, name) => wrongId ?? Reflect.get(known, name) })
          let target: string
          try {
            target = addressOf(def, { params, query }).replace('{*path}', 'x')
          } catch {
            // Half a surrogate pair cannot even be written into an address.
            return
          }
          const test = mara.send(def.method.toLowerCase() as Method, target)
          const response = await (def.method === 'GET'
            ? test
            : test.set('Content-Type', 'application/json').send(JSON.stringify(body) ?? 'null'))
          expect([target, body, response.status < 500 ? 'ours' : response.text]).toEqual([target, body, 'ours'])
          if (response.status >= 400) {
            expect(ProblemBody.safeParse(response.body).success).toBe(true)
            expect(response.text).not.toMatch(/node_modules|\.ts:\d|syntax error|column "|relation "/)
          }
        }
      ),
      { numRuns: def.method === 'GET' ? 10 : 25 }
    )
  })
})

describe('the database after all that', () => {
  it('stands, and nothing was logged as an error of ours', async () => {
    expect(app.logs.errors()).toEqual([])
    expect((await app.as('ines').then((ines) => ines.send('get', '/api/me'))).status).toBe(200)
    expect(({} as Record<string, unknown>)['isOperator']).toBeUndefined()
  })
})
