// ASVS V8.2.1, V8.2.2, V4.4.2-V4.4.4 (trust.md 15, 21): every socket event x everybody x own and foreign things.
import { afterAll, beforeAll, describe, expect, it, onTestFinished } from 'vitest'
import { definitionOf } from '@shared/access/permissions'
import { groupRoutes } from '@shared/contracts/groups'
import { sessionRoutes } from '@shared/contracts/sessions'
import { takeRoutes } from '@shared/contracts/takes'
import { type ClientEvents, clientEvents } from '@shared/events/realtime'
import { expected } from '../support/access-table.ts'
import { startApp, type TestApp } from '../support/app.ts'
import { buildGroup, buildSession, buildTake, newId } from '../support/build.ts'
import { must } from '../support/call.ts'
import { type AskerKey, idOf, type PersonKey, personKeys } from '../support/people.ts'
import { ask, collect, connected, socketFor, statusOf, type TestSocket, until } from '../support/sockets.ts'
import { type Ids, relationsTo, targetCases, type TargetKind } from '../support/world.ts'

let app: TestApp
beforeAll(async () => {
  app = await startApp()
})
afterAll(() => app?.close())

type EventName = keyof ClientEvents
interface Row {
  payload(asker: AskerKey, ids: Ids): object
  /** What those who are let in get, where it is not simply done. */
  status?: (asker: PersonKey, label: string) => number
}
const leads = (asker: PersonKey, label: string): boolean =>
  (label.includes('pell')
    ? 'pell'
    : label.includes('a minor')
      ? 'wren'
      : label.includes('next door')
        ? 'neighbour'
        : 'ines') === asker

/** One row an event. An event without a row fails the test below. */
const rows: Record<EventName, Row> = {
  'group:follow': { payload: (_, ids) => ids },
  'group:unfollow': { payload: (_, ids) => ids },
  'clock:ask': { payload: () => ({}) },
  'session:join': { payload: (_, ids) => ids },
  'session:leave': { payload: (_, ids) => ids },
  'session:step': { payload: (_, ids) => ({ ...ids, isAway: true }) },
  // Nobody has joined: there is nobody who could lead.
  'session:lead': {
    payload: (asker, ids) => ({ ...ids, leaderId: asker === 'anonymous' ? newId() : idOf(asker) }),
    status: () => 422
  },
  'transport:change': {
    payload: (_, ids) => ({ ...ids, positionSec: 1 }),
    status: (asker, label) => (leads(asker, label) ? 200 : 403)
  },
  // Who points has to be in the session.
  'pointer:show': { payload: (_, ids) => ({ ...ids, span: null }), status: () => 409 }
}

const socketOf = async (key: PersonKey): Promise<TestSocket> => connected(socketFor(app.url, await app.as(key)))

describe('the access matrix of socket events', () => {
  it('has a row for every event', () => {
    expect(Object.keys(rows).sort()).toEqual(Object.keys(clientEvents).sort())
  })

  let asked = 0
  it.each(Object.keys(clientEvents) as EventName[])('holds for %s', async (event) => {
    const def = clientEvents[event]
    const row = rows[event]
    const kind: TargetKind = definitionOf(def.access).resource
    const cases = targetCases(app)[kind]
    const nowhere =
      kind === 'site'
        ? []
        : [{ label: 'nothing', standing: {}, make: async (): Promise<Ids> => ({ [`${kind}Id`]: newId() }) }]
    const wrong: string[] = []
    for (const target of [...cases, ...nowhere]) {
      const ids = await target.make()
      await Promise.all(
        personKeys.map(async (key) => {
          // A socket each: so many of one kind in a second are refused.
          const socket = await socketOf(key)
          const verdict = expected(def.access, relationsTo(target.standing, key))
          const wanted = verdict === 'allowed' ? (row.status?.(key, target.label) ?? 200) : verdict
          const status = statusOf(await ask(socket, event, row.payload(key, ids)))
          asked += 1
          if (status !== wanted) wrong.push(`${key} on ${target.label}: ${status} instead of ${wanted}`)
          socket.disconnect()
        })
      )
    }
    expect(wrong).toEqual([])
  })

  it('asked every event as everybody', () => {
    expect(asked).toBeGreaterThan(Object.keys(clientEvents).length * personKeys.length)
    process.stdout.write(
      `socket matrix: ${Object.keys(clientEvents).length} events, ${personKeys.length} people, ${asked} asked\n`
    )
  })
})

describe('the handshake', () => {
  it.each([['websocket'], ['polling']] as const)('refuses a foreign Origin over %s (21, V4.4.2)', async (transport) => {
    const person = await app.as('ines')
    for (const origin of ['https://elsewhere.example', 'null', `${app.url}.elsewhere.example`])
      await expect(connected(socketFor(app.url, person, { origin, transports: [transport] }))).rejects.toThrow()
    await connected(socketFor(app.url, person, { transports: [transport] }))
  })
  it.each([['websocket'], ['polling']] as const)('refuses who is not signed in over %s (V4.4.3)', async (transport) => {
    for (const cookie of ['', 'plumbline=s%3Anonsense.nonsense'])
      await expect(connected(socketFor(app.url, { cookie }, { transports: [transport] }))).rejects.toThrow(
        'sign-in-needed'
      )
  })
})

describe('a socket', () => {
  it('is asked again for its sign-in with every event (21, V4.4.4)', async () => {
    const person = await app.signInAgain('sten')
    const socket = await connected(socketFor(app.url, person))
    await app
      .db('sign_ins')
      .whereRaw(`sess #>> '{passport,user}' = ?`, [idOf('sten')])
      .delete()
    const answer = await ask(socket, 'clock:ask', {}).catch(() => null)
    expect(answer === null || statusOf(answer) === 401).toBe(true)
    await until(() => !socket.connected, 'the socket to be closed')
  })
  it('is held to what each event may carry and how often', async () => {
    const socket = await connected(socketFor(app.url, await app.signInAgain('tomas')))
    for (const payload of [
      null,
      [],
      'x',
      7,
      { groupId: 7 },
      { groupId: { deep: { deeper: [] } } },
      { __proto__: { groupId: newId() } }
    ])
      expect(statusOf(await ask(socket, 'group:follow', payload))).toBe(422)
    const many = await Promise.all(
      Array.from({ length: 60 }, () => ask(socket, 'session:join', { sessionId: newId() }))
    )
    expect(many.filter((answer) => statusOf(answer) === 429).length).toBeGreaterThan(30)
    expect(many.filter((answer) => ![404, 429].includes(statusOf(answer)))).toEqual([])
  })
  it('gets an answer for events that are none, and harms nobody by leaving out the acknowledgement (29)', async () => {
    const socket = await connected(socketFor(app.url, await app.signInAgain('tomas')))
    for (const name of ['no:such', 'toString', 'constructor', '__proto__', 'hasOwnProperty'])
      expect([name, statusOf(await ask(socket, name as EventName, {}))]).toEqual([name, 404])
    ;(socket as unknown as { emit(name: string, ...args: unknown[]): void }).emit('clock:ask')
    ;(socket as unknown as { emit(name: string, ...args: unknown[]): void }).emit('clock:ask', {}, 'extra', 'more')
    expect(statusOf(await ask(socket, 'clock:ask', {}))).toBe(200)
  })
  it('is closed when it floods or sends too much, and the others stay (23)', async () => {
    const [loud, large, calm] = await Promise.all(
      ['tomas', 'pell', 'aude'].map(async (key) =>
        connected(socketFor(app.url, await app.signInAgain(key as PersonKey)))
      )
    )
    for (let n = 0; n < 1000; n += 1) (loud as unknown as { emit(name: string): void }).emit('no:such')
    ;(large as unknown as { emit(name: string, text: string): void }).emit('clock:ask', 'x'.repeat(1_000_000))
    await until(() => !loud?.connected && !large?.connected, 'both to be closed')
    expect(statusOf(await ask(calm as TestSocket, 'clock:ask', {}))).toBe(200)
  })
})

describe('a session of a group that somebody is put out of', () => {
  const setUp = async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const sessionId = await buildSession(app, { takeId, groupId, by: 'ines' })
    const [leader, guest] = [await socketOf('ines'), await socketOf('tomas')]
    await ask(leader, 'session:join', { sessionId })
    expect(statusOf(await ask(guest, 'session:join', { sessionId }))).toBe(200)
    const heard = collect(guest, 'transport:state')
    const move = async (positionSec: number) => {
      const answer = await ask(leader, 'transport:change', { sessionId, positionSec })
      expect(statusOf(answer)).toBe(200)
    }
    await move(1)
    await until(() => heard.length === 1, 'the first change')
    return { groupId, takeId, sessionId, leader, guest, heard, move }
  }
  const isOut = async ({ leader, guest, heard, move, sessionId }: Awaited<ReturnType<typeof setUp>>) => {
    await until(async () => {
      const before = heard.length
      await move(2)
      await new Promise((some) => setTimeout(some, 60))
      return heard.length === before
    }, 'the guest to hear no more')
    expect(statusOf(await ask(guest, 'transport:change', { sessionId, positionSec: 3 }))).toBe(404)
    expect(statusOf(await ask(guest, 'session:join', { sessionId }))).toBe(404)
    const state = await ask(leader, 'session:join', { sessionId })
    expect(state.ok && state.data.people.find(({ id }) => id === idOf('tomas'))?.isHere).toBe(false)
  }

  it('is closed to them, though they never followed the group (15, V4.4.3)', async () => {
    const at = await setUp()
    await must(await app.as('mara'), groupRoutes.removePerson, {
      params: { groupId: at.groupId, userId: idOf('tomas') }
    })
    await isOut(at)
  })
  it('is closed to them when the reach shrinks', async () => {
    const at = await setUp()
    await must(await app.as('ines'), takeRoutes.update, {
      params: { takeId: at.takeId },
      body: { reach: 'my teachers' }
    })
    await isOut(at)
  })
  it('goes with its take, and the group still hears of it', async () => {
    const { groupId, takeId, sessionId, guest } = await setUp()
    const follower = await socketOf('jory')
    await ask(follower, 'group:follow', { groupId })
    const events = collect(follower, 'group:event')
    await must(await app.as('ines'), takeRoutes.remove, { params: { takeId } })
    await until(() => events.some(({ type }) => type === 'take:removed'), 'the removal')
    expect(statusOf(await ask(guest, 'session:join', { sessionId }))).toBe(404)
    expect(app.logs.errors()).toEqual([])
  })
  it('tells of a lost group by itself', async () => {
    const groupId = await buildGroup(app)
    const socket = await socketOf('tomas')
    await ask(socket, 'group:follow', { groupId })
    const [closed, events] = [collect(socket, 'group:closed'), collect(socket, 'group:event')]
    await must(await app.as('mara'), groupRoutes.removePerson, { params: { groupId, userId: idOf('tomas') } })
    await until(() => closed.length === 1, 'the closing')
    await must(await app.as('mara'), groupRoutes.update, { params: { groupId }, body: { name: 'Among ourselves' } })
    await new Promise((some) => setTimeout(some, 200))
    expect(events.filter(({ type }) => type === 'group:updated')).toEqual([])
  })
})

describe('the lead', () => {
  it('is with one person at a time, handed on, taken back by those who may, and never seized (15)', async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const { id: sessionId } = await must(await app.as('ines'), sessionRoutes.start, {
      params: { takeId },
      body: { id: newId() }
    })
    const [ines, tomas, aude, mara] = await Promise.all((['ines', 'tomas', 'aude', 'mara'] as const).map(socketOf))
    for (const socket of [ines, tomas, aude, mara]) await ask(socket!, 'session:join', { sessionId })
    const lead = async (socket: TestSocket | undefined, to: PersonKey) =>
      statusOf(await ask(socket!, 'session:lead', { sessionId, leaderId: idOf(to) }))
    const play = async (socket: TestSocket | undefined) =>
      statusOf(await ask(socket!, 'transport:change', { sessionId, playing: true }))
    expect([await play(ines), await play(tomas), await play(aude)]).toEqual([200, 403, 403])
    expect([await lead(tomas, 'tomas'), await lead(aude, 'aude'), await lead(tomas, 'aude')]).toEqual([403, 403, 403])
    expect(await lead(ines, 'tomas')).toBe(200)
    expect([await play(ines), await play(tomas)]).toEqual([403, 200])
    expect(await lead(mara, 'mara')).toBe(200)
    expect([await play(tomas), await play(mara)]).toEqual([403, 200])
    expect(await lead(mara, 'jory')).toBe(422)
    const both = await Promise.all([lead(ines, 'ines'), lead(mara, 'tomas')])
    expect(both.some((status) => status === 200)).toBe(true)
    const playing = await Promise.all([play(ines), play(tomas), play(mara), play(aude)])
    expect(playing.filter((status) => status === 200).length).toBe(1)
  })
})

describe('two servers on one database', () => {
  it('send what was written at the one to sockets at the other, in order, each as they may know it', async () => {
    const other = await startApp({ beside: app })
    onTestFinished(() => other.close())
    const groupId = await buildGroup(app)
    const hidden = await buildTake(app, { groupId, by: 'ines', reach: 'only me' })
    const socket = await connected(socketFor(other.url, await other.as('tomas')))
    const follow = await ask(socket, 'group:follow', { groupId })
    expect(follow).toEqual({ ok: true, data: { lastSeq: 0 } })
    const events = collect(socket, 'group:event')
    const [mara, ines] = [await app.as('mara'), await app.as('ines')]
    for (let n = 0; n < 5; n += 1)
      await must(mara, groupRoutes.update, { params: { groupId }, body: { name: `Name ${n}` } })
    await must(ines, takeRoutes.update, { params: { takeId: hidden }, body: { title: 'Secret' } })
    await until(() => events.length >= 6, 'six events')
    expect(events.map(({ seq }) => seq)).toEqual([1, 2, 3, 4, 5, 6])
    expect(events.at(-1)).toMatchObject({ type: 'hidden', takeId: null, objectId: null })
  })
})

it('answered nothing with an error of ours', () => {
  expect(app.logs.errors()).toEqual([])
})
