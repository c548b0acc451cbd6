// Signing in and out: ASVS V6 and V7 (trust.md 1-6, 8, 9).
import request from 'supertest'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { accountRoutes } from '@shared/contracts/account'
import { newSignInId, signInLife } from '@server/http/sign-in'
import { commonPasswords } from '@server/services/common-passwords'
import { cookieOf, startApp, type TestApp } from '../support/app.ts'
import { newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { emailOf, idOf, password } from '../support/people.ts'
import { connected, socketFor, until } from '../support/sockets.ts'

let app: TestApp
let clock = 0
beforeAll(async () => {
  app = await startApp({ now: () => Date.now() + clock })
})
afterAll(() => app?.close())

const signUp = (over: object = {}) => ({
  id: newId(),
  name: 'Someone New',
  email: `${newId()}@new.example`,
  password: 'harbour lights at dusk',
  group: { id: newId(), name: 'A group of one' },
  ...over
})
const post = (path: string, body: object, cookie = '') => {
  const test = request(app.url).post(path).set('Origin', app.url)
  return (cookie ? test.set('Cookie', cookie) : test).send(body)
}
const sidOf = (cookie: string): string =>
  decodeURIComponent(cookie.split('=')[1] ?? '')
    .slice(2)
    .split('.')[0] ?? ''

describe('signing in', () => {
  it('renews the id and kills the old one (1, V7.2.4)', async () => {
    const before = await app.signInAgain('ines')
    const response = await post('/api/sign-in', { email: emailOf('ines'), password }, before.cookie)
    const after = cookieOf(response)
    expect(response.status).toBe(200)
    expect(sidOf(after)).not.toBe(sidOf(before.cookie))
    expect((await callRoute(before, accountRoutes.me, {})).status).toBe(401)
  })

  it('takes no id that a visitor brings along (1, V7.2.4)', async () => {
    const planted = 'plumbline=s%3Aplanted-by-somebody-else.c2lnbmF0dXJl'
    const response = await post('/api/sign-in', { email: emailOf('ines'), password }, planted)
    expect(sidOf(cookieOf(response))).not.toContain('planted')
  })

  it('makes ids of at least 128 random bits (2, V7.2.3)', async () => {
    const rows = await app.db('sign_ins').select('sid')
    expect(rows.length).toBeGreaterThan(0)
    for (const { sid } of rows) expect(Buffer.from(sid, 'base64url').length).toBeGreaterThanOrEqual(16)
    const made: string[] = []
    for (let n = 0; n < 10_000; n += 1) made.push(newSignInId())
    expect(new Set(made).size).toBe(10_000)
    const bits = Buffer.concat(made.map((id) => Buffer.from(id, 'base64url')))
    let ones = 0
    for (const byte of bits) ones += (byte.toString(2).match(/1/g) ?? []).length
    // Monobit test of NIST SP 800-22 (formula from memory): |2·ones - n| / sqrt(n) under 3.89 leaves p above 1e-4.
    const n = bits.length * 8
    expect(Math.abs(2 * ones - n) / Math.sqrt(n)).toBeLessThan(3.89)
  })

  it('gives a cookie that scripts and other sites cannot use (3, V3.3.1-V3.3.5)', async () => {
    const response = await post('/api/sign-in', { email: emailOf('jory'), password })
    const set = response.get('Set-Cookie')?.[0] ?? ''
    expect(set).toMatch(/; HttpOnly/)
    expect(set).toMatch(/; SameSite=(Lax|Strict)/)
    expect(set).toMatch(/; Path=\//)
    expect(set).not.toMatch(/Domain=/i)
    expect(set.length).toBeLessThan(4096)
  })

  it('names the cookie __Host- and marks it Secure behind TLS (3, V3.3.1, V3.3.3)', async () => {
    const secure = await startApp({ beside: app, config: { isSecure: true, trustProxy: 1 } })
    try {
      const response = await request(secure.url)
        .post('/api/sign-in')
        .set('Origin', secure.url.replace('http:', 'https:'))
        .set('X-Forwarded-Proto', 'https')
        .send({ email: emailOf('jory'), password })
      const set = response.get('Set-Cookie')?.[0] ?? ''
      expect(set).toMatch(/^__Host-plumbline=/)
      expect(set).toMatch(/; Secure/)
      expect(response.get('Strict-Transport-Security')).toMatch(/max-age=31536000/)
    } finally {
      await secure.close()
    }
  })

  it('refuses a wrong password and an unknown address with one and the same answer (V6.3.8)', async () => {
    const wrong = await post('/api/sign-in', { email: emailOf('pell'), password: 'not the right one' })
    const unknown = await post('/api/sign-in', { email: 'nobody@nowhere.example', password: 'not the right one' })
    const { instance: _one, ...first } = wrong.body as Record<string, unknown>
    const { instance: _two, ...second } = unknown.body as Record<string, unknown>
    expect([wrong.status, first]).toEqual([401, second])
    expect(unknown.status).toBe(401)
  })

  it('stops guessing at one account after some failures, also when they come at once, and leaves others alone (9, V6.3.1)', async () => {
    const guesses = await Promise.all(
      Array.from({ length: 30 }, (_, n) => post('/api/sign-in', { email: emailOf('wren'), password: `guess ${n}` }))
    )
    const statuses = guesses.map(({ status }) => status)
    expect(statuses.filter((status) => status === 401).length).toBeLessThanOrEqual(8)
    expect(statuses.filter((status) => status === 429).length).toBeGreaterThanOrEqual(22)
    expect((await post('/api/sign-in', { email: emailOf('wren'), password })).status).toBe(429)
    expect((await post('/api/sign-in', { email: emailOf('tomas'), password })).status).toBe(200)
  })

  it('forgets failures once the right password came', async () => {
    for (let round = 0; round < 3; round += 1) {
      for (let n = 0; n < 5; n += 1)
        expect((await post('/api/sign-in', { email: emailOf('aude'), password: 'wrong one' })).status).toBe(401)
      expect((await post('/api/sign-in', { email: emailOf('aude'), password })).status).toBe(200)
    }
  })

  it('reads an address in any case', async () => {
    expect((await post('/api/sign-in', { email: emailOf('tomas').toUpperCase(), password })).status).toBe(200)
  })
})

describe('passwords (8, V6.2)', () => {
  it.each([
    ['eight characters', 'q7#Lw2!z'],
    ['sixty-four characters and more', `${'long '.repeat(13)}enough`],
    ['any Unicode', 'пароль δοκιμή 🎸 鍵'],
    ['blanks at both ends', '  padded with care  ']
  ])('accepts %s and signs in with exactly that', async (_, chosen) => {
    const body = signUp({ password: chosen })
    expect((await post('/api/sign-up', body)).status).toBe(201)
    expect((await post('/api/sign-in', { email: body.email, password: chosen })).status).toBe(200)
    expect((await post('/api/sign-in', { email: body.email, password: `${chosen}x` })).status).toBe(401)
    expect((await post('/api/sign-in', { email: body.email, password: chosen.slice(0, -1) })).status).toBe(401)
  })
  it('neither folds case nor truncates', async () => {
    const chosen = `${'a'.repeat(100)}B`
    const body = signUp({ password: chosen })
    await post('/api/sign-up', body)
    expect((await post('/api/sign-in', { email: body.email, password: chosen.toLowerCase() })).status).toBe(401)
    expect((await post('/api/sign-in', { email: body.email, password: 'a'.repeat(100) })).status).toBe(401)
    expect((await post('/api/sign-in', { email: body.email, password: chosen })).status).toBe(200)
  })
  it('refuses the common ones and those under eight characters', async () => {
    expect(commonPasswords.size).toBeGreaterThan(3000)
    for (const chosen of ['password1', 'Password1', 'qwertyuiop', 'football', 'short'])
      expect([chosen, (await post('/api/sign-up', signUp({ password: chosen }))).status]).toEqual([chosen, 422])
  })
  it('are kept only as argon2id hashes', async () => {
    const row = await app
      .db('users')
      .where({ id: idOf('mara') })
      .first('password_hash')
    expect(row?.password_hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
  })
})

describe('ending a sign-in', () => {
  it('makes a copied cookie useless and closes the open socket (4, V7.4.1)', async () => {
    const person = await app.signInAgain('pell')
    const socket = await connected(socketFor(app.url, person))
    let isTold = false
    socket.on('signIn:ended', () => {
      isTold = true
    })
    expect((await callRoute(person, accountRoutes.signOut, {})).status).toBe(200)
    expect((await callRoute(person, accountRoutes.me, {})).status).toBe(401)
    await until(() => !socket.connected, 'the socket to be closed')
    expect(isTold).toBe(true)
  })

  it('takes everything from a disabled account at once (5, V7.4.2)', async () => {
    const body = signUp()
    const cookie = cookieOf(await post('/api/sign-up', body))
    const socket = await connected(socketFor(app.url, { cookie }))
    await app.db('users').where({ id: body.id }).update({ disabled_at: new Date() })
    expect((await request(app.url).get('/api/me').set('Cookie', cookie)).status).toBe(401)
    expect((await post('/api/sign-in', { email: body.email, password: body.password })).status).toBe(401)
    await until(() => !socket.connected, 'the socket to be closed')
  })

  it('takes everything from a deleted account at once (5, V7.4.2)', async () => {
    const body = signUp()
    const cookie = cookieOf(await post('/api/sign-up', body))
    const socket = await connected(socketFor(app.url, { cookie }))
    await app.db('users').where({ id: body.id }).delete()
    expect((await request(app.url).get('/api/me').set('Cookie', cookie)).status).toBe(401)
    await until(() => !socket.connected, 'the socket to be closed')
  })

  it('ends all other sign-ins when the password changes, and none before the old one was given (6, 13, V7.4.3, V6.2.3)', async () => {
    const body = signUp()
    const first = cookieOf(await post('/api/sign-up', body))
    const second = cookieOf(await post('/api/sign-in', { email: body.email, password: body.password }))
    const socket = await connected(socketFor(app.url, { cookie: first }))
    const me = async (cookie: string) => (await request(app.url).get('/api/me').set('Cookie', cookie)).status
    const next = 'lanterns along the quay'
    expect((await post('/api/me/password', { current: 'wrong', next }, second)).status).toBe(422)
    expect(await me(first)).toBe(200)
    expect((await post('/api/me/password', { current: body.password, next }, second)).status).toBe(200)
    expect([await me(first), await me(second)]).toEqual([401, 200])
    await until(() => !socket.connected, 'the socket to be closed')
    expect((await post('/api/sign-in', { email: body.email, password: body.password })).status).toBe(401)
    expect((await post('/api/sign-in', { email: body.email, password: next })).status).toBe(200)
  })

  it('comes by itself after the absolute life, with an answer like any other (7, V7.3.2)', async () => {
    const person = await app.signInAgain('mara')
    clock = signInLife.absoluteMs + 1000
    try {
      expect((await callRoute(person, accountRoutes.me, {})).status).toBe(401)
      const fresh = await app.signInAgain('mara')
      expect((await callRoute(fresh, accountRoutes.me, {})).status).toBe(200)
    } finally {
      clock = 0
    }
    expect((await callRoute(person, accountRoutes.me, {})).status).toBe(401)
  })

  it('comes after the idle life in the database (7, V7.3.1)', async () => {
    const person = await app.signInAgain('mara')
    await app
      .db('sign_ins')
      .where({ sid: sidOf(person.cookie) })
      .update({ expire: new Date(Date.now() - 1000) })
    expect((await callRoute(person, accountRoutes.me, {})).status).toBe(401)
  })
})

describe('using a sign-in', () => {
  it('writes nothing to the database on every request, and keeps it alive every ten minutes', async () => {
    const person = await app.signInAgain('ines')
    const row = () =>
      app
        .db('sign_ins')
        .where({ sid: sidOf(person.cookie) })
        .first('expire')
    const version = async () =>
      (
        await app.db.raw<{ rows: { xmin: string }[] }>('select xmin::text from sign_ins where sid = ?', [
          sidOf(person.cookie)
        ])
      ).rows[0]?.xmin
    const before = await version()
    for (let n = 0; n < 5; n += 1) {
      const { response } = await callRoute(person, accountRoutes.me, {})
      expect(response.get('Set-Cookie')).toBeUndefined()
    }
    expect(await version()).toBe(before)
    const expireBefore = (await row())?.expire.getTime() ?? 0
    clock = 11 * 60_000
    try {
      const { response } = await callRoute(person, accountRoutes.me, {})
      expect(cookieOf(response)).toBe(person.cookie)
      expect((await row())?.expire.getTime()).toBeGreaterThan(expireBefore)
    } finally {
      clock = 0
    }
  })

  it('does not bring a sign-in back that ended while a request was under way', async () => {
    const person = await app.signInAgain('ines')
    clock = 11 * 60_000
    try {
      // Keeping alive and ending at the same moment, many times over.
      await Promise.all([
        ...Array.from({ length: 10 }, () => callRoute(person, accountRoutes.me, {})),
        callRoute(person, accountRoutes.signOut, {}),
        ...Array.from({ length: 10 }, () => callRoute(person, accountRoutes.me, {}))
      ])
      expect((await callRoute(person, accountRoutes.me, {})).status).toBe(401)
    } finally {
      clock = 0
    }
  })

  it('gives personal answers that nobody keeps, and clears what was kept at the end (43, V14.3.1, V14.3.2)', async () => {
    const person = await app.signInAgain('ines')
    const { response } = await callRoute(person, accountRoutes.me, {})
    expect(response.get('Cache-Control')).toBe('no-store')
    const end = await callRoute(person, accountRoutes.signOut, {})
    expect(end.response.get('Clear-Site-Data')).toBe('"cache"')
  })
})

describe('signing up', () => {
  it('opens an account with a group of its own, which it owns', async () => {
    const body = signUp()
    const response = await post('/api/sign-up', body)
    expect(response.body).toMatchObject({ id: body.id, memberships: [{ groupId: body.group.id, role: 'owner' }] })
  })
  it('refuses both or neither of group and invitation', async () => {
    expect((await post('/api/sign-up', signUp({ invitation: 'x'.repeat(43) }))).status).toBe(422)
    expect((await post('/api/sign-up', signUp({ group: undefined }))).status).toBe(422)
  })
  it('makes one account when it is sent many times at once', async () => {
    const body = signUp()
    const all = await Promise.all(Array.from({ length: 6 }, () => post('/api/sign-up', body)))
    expect(all.filter(({ status }) => status === 201).length).toBe(1)
    expect(all.filter(({ status }) => status === 409).length).toBe(5)
  })
  it('keeps what an account says of itself', async () => {
    const person = await app.as('tomas')
    await must(person, accountRoutes.update, { body: { tapLagMs: -35.5 } })
    expect(await must(person, accountRoutes.me, {})).toMatchObject({ tapLagMs: -35.5, email: emailOf('tomas') })
  })
})

it('answered nothing with an error of ours', () => {
  expect(app.logs.errors()).toEqual([])
})
