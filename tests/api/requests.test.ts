// What holds for every request: origins, headers, errors (ASVS V3.4, V3.5, V16.5; trust.md 16, 20, 22, 40, 41, 43).
import { request as rawRequest } from 'node:http'
import type { AddressInfo } from 'node:net'
import request from 'supertest'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { commentRoutes } from '@shared/contracts/comments'
import { allRoutes } from '@shared/contracts/registry'
import { addressOf } from '@shared/contracts/route'
import { takeRoutes } from '@shared/contracts/takes'
import { ProblemBody } from '@shared/errors/problems'
import { limits } from '@shared/limits'
import { type Method, type Person, startApp, type TestApp } from '../support/app.ts'
import { buildComment, buildTake, demoGroup, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { idOf } from '../support/people.ts'

let app: TestApp
let ines: Person
let takeId: string
beforeAll(async () => {
  app = await startApp()
  ines = await app.as('ines')
  takeId = await buildTake(app)
})
afterAll(() => app?.close())

const comment = () => ({ id: newId(), kind: 'good', text: 'Yes.', startSec: 0, endSec: 1 })
const countComments = async (): Promise<number> => (await app.db('comments').where({ take_id: takeId })).length
const path = () => `/api/takes/${takeId}/comments`

/** As node sends it: supertest would tidy the address up. */
const raw = (target: string, headers: Record<string, string> = {}): Promise<{ status: number; body: string }> =>
  new Promise((done, fail) => {
    const { port } = app.http.address() as AddressInfo
    const asked = rawRequest({ port, path: target, headers: { Cookie: ines.cookie, ...headers } }, (answer) => {
      let body = ''
      answer.on('data', (chunk: Buffer) => (body += chunk.toString()))
      answer.on('end', () => done({ status: answer.statusCode ?? 0, body }))
    })
    asked.on('error', fail)
    asked.end()
  })

describe('requests from other sites (20, V3.5.1-V3.5.3)', () => {
  const routes = allRoutes()
  const changing = routes.filter((route) => route.def.method !== 'GET')
  it.each(changing.map(({ name, def }) => ({ name, def })))(
    'are refused by $name, with a foreign or no Origin',
    async ({ def }) => {
      const ids = { groupId: demoGroup.id, takeId, userId: idOf('pell'), index: '0' }
      const target = addressOf(def, { params: new Proxy(ids, { get: (o, key) => Reflect.get(o, key) ?? newId() }) })
      for (const origin of ['https://elsewhere.example', 'null', `${app.url}.elsewhere.example`, undefined]) {
        const test = request(app.url)[def.method.toLowerCase() as Method](target).set('Cookie', ines.cookie)
        const { status, body } = await (origin ? test.set('Origin', origin) : test).send({})
        expect([origin, status, (body as ProblemBody).type]).toEqual([origin, 403, '/problems/foreign-origin'])
      }
    }
  )

  it.each(['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x'])(
    'change nothing as a form of type %s',
    async (type) => {
      const before = await countComments()
      const forged = request(app.url).post(path()).set('Cookie', ines.cookie).set('Content-Type', type)
      const { status } = await forged.set('Origin', 'https://elsewhere.example').send(JSON.stringify(comment()))
      expect(status).toBe(403)
      // Not even from our own page is a form read as JSON.
      const ours = ines.send('post', path()).set('Content-Type', type)
      expect((await ours.send(JSON.stringify(comment()))).status).toBe(422)
      expect(await countComments()).toBe(before)
    }
  )

  it('are never let in by CORS (22, V3.4.2)', async () => {
    for (const method of ['get', 'options', 'head'] as const) {
      const response = await request(app.url)[method]('/api/me').set('Origin', 'https://elsewhere.example')
      expect(Object.keys(response.headers).filter((name) => name.startsWith('access-control-'))).toEqual([])
    }
  })

  it('change nothing by GET or HEAD', async () => {
    const version = async () => (await app.db('groups').where({ id: demoGroup.id }).first('last_seq'))?.last_seq
    const before = await version()
    const reading = routes.filter((route) => route.def.method === 'GET' && !route.def.path.includes('*'))
    for (const { def } of reading)
      for (const method of ['get', 'head'] as const) {
        const target = addressOf(def, { params: { groupId: demoGroup.id, takeId, index: '0' }, query: { after: 0 } })
        expect([target, (await ines.send(method, target)).status < 500]).toEqual([target, true])
      }
    expect(await version()).toBe(before)
  })
})

describe('HEAD', () => {
  it('answers like GET without a body', async () => {
    const [head, get] = [await ines.send('head', path()), await ines.send('get', path())]
    expect([head.status, head.get('Content-Type')]).toEqual([200, get.get('Content-Type')])
    expect(head.text ?? '').toBe('')
    expect((await ines.send('head', '/api/takes/none')).status).toBe(404)
  })
})

describe('answers', () => {
  it('carry a strict content security policy and its companions (40, V3.4.1, V3.4.3-V3.4.8)', async () => {
    for (const target of ['/', '/takes/anything', '/api/me', '/api/nothing-here', '/assets/main-0.js', '/index.html']) {
      const response = await ines.send('get', target).set('Accept', 'text/html')
      const policy = response.get('Content-Security-Policy') ?? ''
      for (const part of ["default-src 'none'", "object-src 'none'", "base-uri 'none'", "frame-ancestors 'none'"])
        expect([target, policy]).toEqual([target, expect.stringContaining(part)])
      const scripts = /script-src ([^;]*)/.exec(policy)?.[1] ?? ''
      expect(scripts).not.toMatch(/unsafe-inline|'unsafe-eval'|https?:|\*/)
      expect(response.get('Referrer-Policy')).toBe('no-referrer')
      expect(response.get('Cross-Origin-Opener-Policy')).toBe('same-origin')
      expect(response.get('X-Content-Type-Options')).toBe('nosniff')
      expect(response.get('X-Robots-Tag')).toContain('noindex')
      expect(response.get('X-Powered-By')).toBeUndefined()
    }
  })

  it('give every page a nonce of its own', async () => {
    const nonces = new Set<string>()
    for (const target of ['/', '/index.html', '/takes/anything']) {
      const response = await ines.send('get', target).set('Accept', 'text/html')
      const nonce = /nonce="([^"]+)"/.exec(response.text)?.[1] ?? ''
      expect(response.get('Content-Security-Policy')).toContain(`'nonce-${nonce}'`)
      expect(response.get('Cache-Control')).toBe('no-store')
      nonces.add(nonce)
    }
    expect(nonces.size).toBe(3)
  })

  it('are kept by nobody where they are personal (43, V14.3.2)', async () => {
    const personal = allRoutes().filter((route) => route.def.kind === 'json' && route.def.path.startsWith('/api'))
    for (const { def } of personal.filter((route) => route.def.method === 'GET')) {
      const target = addressOf(def, { params: { groupId: demoGroup.id, takeId }, query: { after: 0 } })
      expect([target, (await ines.send('get', target)).get('Cache-Control')]).toEqual([target, 'no-store'])
    }
  })
})

describe('errors (41, V16.5.1; RFC 9457)', () => {
  const expectProblem = (status: number, text: string, type?: string): void => {
    const body = JSON.parse(text) as ProblemBody
    expect(ProblemBody.parse(body)).toEqual(body)
    // RFC 9457, 3.1: type, title, status and instance; the status repeats the answer's own.
    expect(body).toMatchObject({ status, title: expect.any(String), instance: expect.any(String) })
    if (type) expect(body.type).toBe(`/problems/${type}`)
    expect(text).not.toMatch(/node_modules|\bat \w+.*:\d+|select |insert |\/work\/|\.ts:/i)
  }
  it('are problems of one shape whatever went wrong', async () => {
    const cases: [() => request.Test, number, string][] = [
      [() => ines.send('get', '/api/nothing/here'), 404, 'not-found'],
      [() => ines.send('get', '/api/takes/none'), 404, 'not-found'],
      [() => request(app.url).get('/api/me'), 401, 'sign-in-needed'],
      [() => ines.send('patch', `/api/groups/${demoGroup.id}`).send({ name: 'Mine' }), 403, 'forbidden'],
      [() => ines.send('post', path()).send({ id: 1 }), 422, 'invalid'],
      [() => ines.send('post', path()).set('Content-Type', 'application/json').send('{"id": '), 400, 'bad-request'],
      [
        () => ines.send('post', path()).set('Content-Type', 'application/json; charset=klingon').send('{}'),
        400,
        'bad-request'
      ],
      [
        () =>
          ines
            .send('post', path())
            .set('Content-Type', 'application/json')
            .set('Content-Encoding', 'strange')
            .send('{}'),
        400,
        'bad-request'
      ],
      [() => ines.send('post', path()).send({ ...comment(), text: 'x'.repeat(limits.jsonBytes) }), 413, 'too-large'],
      [() => ines.send('get', `/api/groups/${demoGroup.id}/events?after=-1`), 422, 'invalid'],
      [() => ines.send('get', `/api/groups/${demoGroup.id}/events?after=1&after=2`), 422, 'invalid'],
      [() => ines.send('get', `/api/groups/${demoGroup.id}/takes?cursor=AAAA`), 422, 'invalid']
    ]
    for (const [ask, status, type] of cases) {
      const response = await ask()
      expect([type, response.status, response.get('Content-Type')]).toEqual([
        type,
        status,
        'application/problem+json; charset=utf-8'
      ])
      expectProblem(status, response.text, type)
    }
  })

  it('name every field that does not fit', async () => {
    const { problem } = await callRoute(ines, commentRoutes.create, {
      params: { takeId },
      body: { ...comment(), text: '', startSec: -1 } as never
    })
    expect(problem.errors?.map(({ in: where, path: field }) => `${where} ${field}`).sort()).toEqual(
      expect.arrayContaining(['body startSec', 'body text'])
    )
  })

  it.each([
    '/api/takes/%E0%A4%A',
    '/api/takes/%',
    '/%E0%A4%A',
    '/assets/%00',
    '/assets/%2e%2e/%2e%2e/etc/passwd',
    '/..%2f..%2fetc/passwd',
    '//etc/passwd',
    '/api/takes/%00'
  ])('answer the malformed address %s without one of ours (36, V5.3.2)', async (target) => {
    const { status, body } = await raw(target, { Accept: 'text/html' })
    expect(status).toBeLessThan(500)
    expect(body).not.toContain('root:')
    if (status >= 400) expectProblem(status, body)
  })

  it('refuse ids in another spelling than the one they were given in', async () => {
    expect((await ines.send('get', `/api/takes/${takeId.toUpperCase()}`)).status).toBe(404)
    expect((await ines.send('post', path()).send({ ...comment(), id: newId().toUpperCase() })).status).toBe(422)
  })

  it('come for cursors that look right and are not', async () => {
    for (const cursor of [['1', newId()], ['2026-01-01T00:00:00Z', '-'.repeat(36)], [{}, []], 'x', null]) {
      const text = Buffer.from(JSON.stringify(cursor)).toString('base64url')
      expect((await ines.send('get', `/api/groups/${demoGroup.id}/takes?cursor=${text}`)).status).toBe(422)
    }
  })

  it('come for text that no database keeps, also deep inside', async () => {
    for (const text of ['a\0b', 'half \ud83d of one', '\udc00'])
      expect((await ines.send('post', path()).send({ ...comment(), text })).status).toBe(422)
    const mark = { kind: 'setAnchor', anchor: { id: 'a\0', sec: 1, position: { bar: 1, beat: { n: 1, d: 1 } } } }
    const edit = { id: newId(), baseRevision: 0, operations: [mark] }
    expect((await ines.send('patch', `/api/takes/${takeId}/bar-map`).send(edit)).status).toBe(422)
    const signIn = await request(app.url)
      .post('/api/sign-in')
      .set('Origin', app.url)
      .send({ email: 'a\0@b.example', password: 'x' })
    expect(signIn.status).toBe(422)
  })
})

describe('keys that a body should not have (16, V8.2.3, V15.3.3)', () => {
  it('set nothing', async () => {
    const extra = {
      author_id: idOf('mara'),
      authorId: idOf('mara'),
      author: { id: idOf('mara'), name: 'Mara' },
      group_id: newId(),
      takeId: newId(),
      role: 'owner',
      created_at: '2001-01-01T00:00:00Z',
      createdAt: '2001-01-01T00:00:00Z',
      settled_by: idOf('mara'),
      settledBy: { id: idOf('mara'), name: 'Mara' },
      isOpen: false,
      abilities: ['comment:delete']
    }
    const made = await must(ines, commentRoutes.create, {
      params: { takeId },
      body: { ...comment(), kind: 'question', ...extra } as never
    })
    expect(made).toMatchObject({ author: { id: idOf('ines') }, takeId, isOpen: true, settledBy: null })
    expect(made.createdAt.startsWith('2001')).toBe(false)
    const take = await must(ines, takeRoutes.update, {
      params: { takeId },
      body: {
        title: 'Same',
        uploader_id: idOf('mara'),
        uploader: { id: idOf('mara') },
        state: 'failed',
        group_id: newId()
      } as never
    })
    expect(take).toMatchObject({ uploader: { id: idOf('ines') }, state: 'ready', groupId: demoGroup.id })
    const me = await ines
      .send('patch', '/api/me')
      .send({ isOperator: true, is_operator: true, email: 'x@y.example', role: 'owner' })
    expect(me.body).toMatchObject({ isOperator: false, email: 'ines@harbourstreet.example' })
  })

  it('do not reach any prototype (29, V15.3.6)', async () => {
    for (const text of [
      '{"__proto__":{"isOperator":true},"text":"Mine"}',
      '{"constructor":{"prototype":{"isOperator":true}},"text":"Mine"}'
    ]) {
      const commentId = await buildComment(app, { takeId, by: 'ines' })
      const response = await ines
        .send('patch', `/api/comments/${commentId}`)
        .set('Content-Type', 'application/json')
        .send(text)
      expect(response.status).toBe(200)
    }
    expect(({} as Record<string, unknown>)['isOperator']).toBeUndefined()
  })
})

describe('log lines (31, V16.4.1)', () => {
  it('stay one line each whatever somebody sends', async () => {
    await ines.send('get', '/api/%0d%0a%7B%22level%22:%22error%22%7D')
    app.logs.log.warn('http', 'first\r\nsecond', { said: 'a\nb' })
    for (const line of app.logs.raw) expect(line.trimEnd()).not.toMatch(/[\r\n]/)
    expect(app.logs.lines().at(-1)?.message).toBe('first\r\nsecond')
  })
  it('tell no words, names, passwords or cookies', async () => {
    await must(ines, commentRoutes.create, { params: { takeId }, body: { ...comment(), text: 'Only for us' } as never })
    const all = app.logs.raw.join('')
    for (const secret of ['Only for us', 'harbourstreet', 'harbour-street-demo', ines.cookie.split('=')[1] ?? 'none'])
      expect(all).not.toContain(secret)
  })
})

describe('a database that is away for a moment', () => {
  it('makes requests fail with 503 and lets them work afterwards', async () => {
    // Every connection of the pools is cut; the next request opens new ones.
    await app.db.raw(
      'select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and pid <> pg_backend_pid()'
    )
    const first = await ines.send('get', '/api/me')
    expect([200, 503]).toContain(first.status)
    let last = first.status
    for (let tries = 0; tries < 20 && last !== 200; tries += 1) last = (await ines.send('get', '/api/me')).status
    expect(last).toBe(200)
  })
})
