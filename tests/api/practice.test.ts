// What one person keeps for practising: loops on a take and preferences (trust.md 16, 17, 29, 44).
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { groupRoutes } from '@shared/contracts/groups'
import { preferenceRoutes } from '@shared/contracts/preferences'
import { type CreateSavedLoop, savedLoopRoutes } from '@shared/contracts/saved-loops'
import { takeRoutes } from '@shared/contracts/takes'
import { limits } from '@shared/limits'
import { startApp, type TestApp } from '../support/app.ts'
import { buildGroup, buildSavedLoop, buildTake, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { idOf, type PersonKey } from '../support/people.ts'

let app: TestApp
let groupId: string
beforeAll(async () => {
  app = await startApp()
  groupId = await buildGroup(app)
})
afterAll(() => app?.close())

const loop = (more: Partial<CreateSavedLoop> = {}): CreateSavedLoop => ({
  id: newId(),
  name: 'Turnaround, slowly',
  span: { startSec: 0.5, endSec: 1 },
  rate: 0.6,
  ladder: { from: 0.6, to: 1, step: 0.05, every: 4 },
  restBeats: 4,
  ...more
})
const keep = async (by: PersonKey, takeId: string, body: CreateSavedLoop) =>
  callRoute(await app.as(by), savedLoopRoutes.create, { params: { takeId }, body })
const listed = async (by: PersonKey, takeId: string) =>
  (await must(await app.as(by), savedLoopRoutes.list, { params: { takeId } })).items

describe('saved loops', () => {
  it('are listed to the one who keeps them in the order of their place, and to nobody else', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const late = loop({ name: 'Bridge', span: { startSec: 1, endSec: 1.5 }, rate: null, ladder: null, restBeats: 0 })
    const early = loop()
    for (const one of [late, early]) expect((await keep('aude', takeId, one)).status).toBe(201)
    const items = await listed('aude', takeId)
    expect(items).toEqual(
      [early, late].map((one) => ({ ...one, takeId, createdAt: expect.any(String), updatedAt: expect.any(String) }))
    )
    for (const other of ['ines', 'mara', 'tomas'] as const) expect(await listed(other, takeId)).toEqual([])
  })

  it('are kept once however often they are sent, and an id is taken from nobody', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const one = loop()
    const answers = await Promise.all(Array.from({ length: 4 }, () => keep('tomas', takeId, one)))
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201, 201])
    expect(await listed('tomas', takeId)).toHaveLength(1)
    expect((await keep('pell', takeId, one)).status).toBe(409)
    const elsewhere = await buildTake(app, { groupId, by: 'ines' })
    expect((await keep('tomas', elsewhere, one)).status).toBe(409)
  })

  it('can be renamed and changed part by part, and come back after a deletion with the id they had', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const tomas = await app.as('tomas')
    const one = loop()
    const kept = (await keep('tomas', takeId, one)).body
    const params = { savedLoopId: one.id }
    const renamed = await must(tomas, savedLoopRoutes.change, { params, body: { name: 'The ♭9' } })
    expect(renamed).toEqual({ ...kept, name: 'The ♭9', updatedAt: expect.any(String) })
    const body = { span: { startSec: 0, endSec: 1.25 }, rate: null, ladder: null }
    expect(await must(tomas, savedLoopRoutes.change, { params, body })).toMatchObject({
      ...body,
      name: 'The ♭9',
      restBeats: 4
    })
    await must(tomas, savedLoopRoutes.remove, { params })
    expect((await callRoute(tomas, savedLoopRoutes.remove, { params })).status).toBe(404)
    expect((await keep('tomas', takeId, one)).status).toBe(201)
  })

  it.each([
    ['an end before its start', { span: { startSec: 1, endSec: 0.5 } }, 'span.endSec'],
    ['no length', { span: { startSec: 1, endSec: 1 } }, 'span.endSec'],
    ['a start after the take', { span: { startSec: 5000, endSec: 5001 } }, 'span.startSec'],
    ['no name', { name: ' ' }, 'name'],
    ['a speed that nothing plays at', { rate: 0.1 }, 'rate'],
    ['a ladder that goes the other way', { ladder: { from: 0.6, to: 1, step: -0.05, every: 4 } }, 'ladder.step'],
    ['half a beat of rest', { restBeats: 0.5 }, 'restBeats']
  ])('are refused with %s', async (_, wrong, path) => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const { status, problem } = await keep('tomas', takeId, loop(wrong))
    expect([status, problem.errors?.map((error) => error.path)]).toEqual([422, [path]])
  })

  it('take over nothing but what a person may set (16)', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const one = { ...loop(), userId: idOf('pell'), user_id: idOf('pell'), createdAt: '2020-01-01T00:00:00.000Z' }
    const { body } = await keep('tomas', takeId, one)
    expect(body.createdAt).not.toBe(one.createdAt)
    expect(await app.db('saved_loops').where({ id: one.id }).first('user_id')).toEqual({ user_id: idOf('tomas') })
  })

  it('are out of reach once their keeper may not hear the take any more, and there again when they may', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const tomas = await app.as('tomas')
    const ines = await app.as('ines')
    const savedLoopId = await buildSavedLoop(app, { takeId, by: 'tomas' })
    const asks = async () => [
      (await callRoute(tomas, savedLoopRoutes.list, { params: { takeId } })).status,
      (await callRoute(tomas, savedLoopRoutes.change, { params: { savedLoopId }, body: { name: 'Mine' } })).status
    ]
    await must(ines, takeRoutes.update, { params: { takeId }, body: { reach: 'only me' } })
    expect([...(await asks()), (await keep('tomas', takeId, loop())).status]).toEqual([404, 404, 404])
    await must(ines, takeRoutes.update, { params: { takeId }, body: { reach: 'group' } })
    expect(await asks()).toEqual([200, 200])
  })

  it('are not written any more once a removal was acknowledged (19)', async () => {
    const group = await buildGroup(app)
    const takeId = await buildTake(app, { groupId: group, by: 'ines' })
    const removal = must(await app.as('mara'), groupRoutes.removePerson, {
      params: { groupId: group, userId: idOf('tomas') }
    })
    const answers = await Promise.all([removal, ...Array.from({ length: 6 }, () => keep('tomas', takeId, loop()))])
    const statuses = answers.slice(1).map((answer) => (answer as { status: number }).status)
    expect(statuses.filter((status) => status !== 201 && status !== 404)).toEqual([])
    expect((await keep('tomas', takeId, loop())).status).toBe(404)
  })

  it('go with the take and with the account that keeps them (44)', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    await buildSavedLoop(app, { takeId, by: 'tomas' })
    await must(await app.as('ines'), takeRoutes.remove, { params: { takeId } })
    expect(await app.db('saved_loops').where({ take_id: takeId })).toEqual([])

    const [kept, leaver] = [await buildTake(app, { groupId, by: 'ines' }), newId()]
    await app
      .db('users')
      .insert({ id: leaver, name: 'Leaver', email: `${leaver}@x.example`, email_key: leaver, password_hash: 'none' })
    await app
      .db('saved_loops')
      .insert({ id: newId(), take_id: kept, user_id: leaver, name: 'Gone', start_sec: 0, end_sec: 1 })
    await app.db('users').where({ id: leaver }).delete()
    expect(await app.db('saved_loops').where({ user_id: leaver })).toEqual([])
  })

  it('stop at their number on one take', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const row = (n: number) => ({
      id: newId(),
      take_id: takeId,
      user_id: idOf('tomas'),
      name: `${n}`,
      start_sec: n,
      end_sec: n + 1
    })
    await app.db('saved_loops').insert(Array.from({ length: limits.savedLoopsPerTake }, (__, n) => row(n)))
    expect((await keep('tomas', takeId, loop())).problem.type).toBe('/problems/over-quota')
    expect((await keep('pell', takeId, loop())).status).toBe(201)
  })

  it('tell the group nothing', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const events = async () => (await app.db('events').where({ group_id: groupId })).length
    const before = await events()
    await keep('tomas', takeId, loop())
    expect(await events()).toBe(before)
  })
})

describe('preferences', () => {
  const change = async (by: PersonKey, body: object) =>
    (await app.as(by)).send('patch', '/api/me/preferences').send(body)
  const kept = async (by: PersonKey) => must(await app.as(by), preferenceRoutes.get, {})

  it('begin empty, merge key by key, go back by null, and are one person’s own', async () => {
    expect(await kept('ines')).toEqual({})
    await change('ines', { volume: 0.4, keys: { loop: ['p'], backBar: [] } })
    const click = {
      isOn: true,
      pattern: '2 and 4',
      subdivision: 1,
      silence: { heardBars: 3, silentBars: 1 },
      level: 0.3
    }
    const answer = await change('ines', { click, countIn: 'two bars', areKeysOff: true })
    const whole = { volume: 0.4, keys: { loop: ['p'], backBar: [] }, click, countIn: 'two bars', areKeysOff: true }
    expect([answer.status, answer.body]).toEqual([200, whole])
    expect((await change('ines', { keys: null, areKeysOff: null, countIn: null })).body).toEqual({ volume: 0.4, click })
    expect(await kept('ines')).toEqual({ volume: 0.4, click })
    expect(await kept('mara')).toEqual({})
  })

  it('lose nothing when two browsers change different keys at once', async () => {
    await Promise.all([
      change('pell', { volume: 0.2 }),
      change('pell', { countIn: 'one bar' }),
      change('pell', { lowFocusTopHz: 240 })
    ])
    expect(await kept('pell')).toEqual({ volume: 0.2, countIn: 'one bar', lowFocusTopHz: 240 })
  })

  it.each([
    ['a key that nobody knows', { colour: 'loud' }],
    ['an action that nobody knows', { keys: { explode: ['x'] } }],
    ['a volume above all', { volume: 1.2 }],
    ['a hundred keys for one action', { keys: { loop: Array.from({ length: 100 }, (_, n) => `F${n}`) } }],
    ['a key with a space in it', { keys: { loop: ['a b'] } }],
    ['a long story for a key', { keys: { loop: ['x'.repeat(500)] } }],
    ['half a click', { click: { isOn: true } }],
    [
      'more in the click than there is',
      { click: { isOn: true, pattern: '1 only', subdivision: 1, silence: null, level: 1, note: 'x'.repeat(9000) } }
    ]
  ])('refuse %s and stay as they were', async (_, body) => {
    const before = await kept('wren')
    expect((await change('wren', body)).status).toBe(422)
    expect(await kept('wren')).toEqual(before)
  })

  it('are not led astray by names that every object has (29)', async () => {
    const raw = async (json: string) =>
      (await app.as('wren')).send('patch', '/api/me/preferences').set('Content-Type', 'application/json').send(json)
    for (const json of [
      '{"__proto__": {"volume": 0.9}}',
      '{"constructor": {"prototype": {"volume": 0.9}}}',
      '{"keys": {"__proto__": ["x"], "constructor": ["x"]}}'
    ])
      expect([json, [200, 422].includes((await raw(json)).status), await kept('wren')]).toEqual([json, true, {}])
    expect(({} as Record<string, unknown>)['volume']).toBeUndefined()
  })

  it('leave out what a former version kept and this one cannot read', async () => {
    const old = JSON.stringify({ volume: 0.5, keys: { explode: ['x'] }, hat: 'on' }) as unknown as object
    await app
      .db('users')
      .where({ id: idOf('jory') })
      .update({ preferences: old })
    expect(await kept('jory')).toEqual({ volume: 0.5 })
  })
})
