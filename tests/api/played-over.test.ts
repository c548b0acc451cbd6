// A take that was played over another one: who may, what it says, and the bars that it comes with (trust.md 14, 29).
import { rmSync } from 'node:fs'
import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { takeRoutes, type PlayedOver } from '@shared/contracts/takes'
import type { BarMapBody } from '@shared/timing/types'
import { type Person, startApp, type TestApp } from '../support/app.ts'
import { buildGroup, buildTake, newId } from '../support/build.ts'
import { must } from '../support/call.ts'
import { makeRecording, makeScratch, sine } from '../support/media.ts'

let app: TestApp
let folder: string
let wav: Buffer
let groupId: string
let ines: Person
let tomas: Person
beforeAll(async () => {
  app = await startApp()
  ines = await app.as('ines')
  tomas = await app.as('tomas')
  groupId = await buildGroup(app)
  folder = makeScratch()
  wav = readFileSync(makeRecording(folder, 'a.wav', sine(110, 5, 8000)))
})
afterAll(async () => {
  rmSync(folder, { recursive: true, force: true })
  await app?.close()
})

const bars: BarMapBody = {
  anchors: [1, 2, 3, 4, 5].map((bar) => ({ id: `b${bar}`, sec: bar * 2, position: { bar, beat: { n: 1, d: 1 } } })),
  meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
  marks: [{ bar: 1, formBar: 1, newPass: true }]
}
const takeWithBars = async (by: 'ines' | 'tomas', reach: 'group' | 'only me' = 'group', inGroup = groupId) => {
  const takeId = await buildTake(app, { by, groupId: inGroup, reach })
  const body = { id: newId(), baseRevision: 0, operations: [{ kind: 'setAll' as const, body: bars }] }
  await must(by === 'ines' ? ines : tomas, barMapRoutes.edit, { params: { takeId }, body })
  return takeId
}
const upload = (over: PlayedOver | string, person = tomas, id = newId()) =>
  person
    .send('post', `/api/groups/${groupId}/takes`)
    .field({ id, title: 'Over it, try 1', reach: 'my teachers', agreed: 'yes' })
    .field({ over: typeof over === 'string' ? over : JSON.stringify(over) })
    .attach('recording', wav, 'try.wav')
const barsOf = (person: Person, takeId: string) => must(person, barMapRoutes.get, { params: { takeId } })
const countOf = async (table: 'takes' | 'documents' | 'events') =>
  Number((await app.db(table).count<{ count: string }[]>())[0]?.count)

describe('a take played over another one', () => {
  it('names it and comes with its bars at its own seconds, once however often it is sent', async () => {
    const takeId = await takeWithBars('ines')
    const id = newId()
    const answers = await Promise.all([1, 2].map(() => upload({ takeId, placeSec: 2.9, rate: 0.5 }, tomas, id)))
    expect(answers.map(({ status }) => status)).toEqual([201, 201])
    expect(answers[0]?.body).toMatchObject({ id, overTakeId: takeId, reach: 'my teachers' })
    const { revision, body, canUndo } = await barsOf(tomas, id)
    // 5 seconds at half speed from 2.9 on: to 5.4. Bar 2 of the old take is at 4, 1.1 of it later, which takes 2.2 seconds.
    const line = body.anchors.find(({ position }) => position.bar === 2 && position.beat.n === position.beat.d)
    expect(line?.sec).toBeCloseTo(2.2, 9)
    expect([revision, canUndo]).toEqual([1, true])
    expect(body.meters).toEqual(bars.meters)
    expect(body.anchors.every(({ sec }) => sec > -1.5 && sec < 6.5)).toBe(true)
    expect((await barsOf(ines, takeId)).body).toEqual(bars)
    expect((await must(tomas, takeRoutes.get, { params: { takeId: id } })).overTakeId).toBe(takeId)
  })

  it('comes without bars where the other one has none, and outlives it', async () => {
    const takeId = await buildTake(app, { by: 'ines', groupId })
    const { status, body } = await upload({ takeId, placeSec: 0, rate: 1 })
    const made = body as { id: string }
    expect([status, (await barsOf(tomas, made.id)).body.anchors]).toEqual([201, []])
    await must(ines, takeRoutes.remove, { params: { takeId } })
    expect((await must(tomas, takeRoutes.get, { params: { takeId: made.id } })).overTakeId).toBeNull()
  })

  it('is refused alike over a take that is hidden, elsewhere or not there, and leaves nothing behind', async () => {
    const elsewhere = await buildGroup(app)
    const hidden = await takeWithBars('ines', 'only me')
    const outside = await takeWithBars('ines', 'group', elsewhere)
    const before = await Promise.all([countOf('takes'), countOf('documents'), countOf('events')])
    const refused = await Promise.all(
      [hidden, outside, newId()].map((takeId) => upload({ takeId, placeSec: 0, rate: 1 }))
    )
    expect(refused.map(({ status }) => status)).toEqual([422, 422, 422])
    const words = refused.map(({ body }) => JSON.stringify((body as { errors: unknown }).errors))
    expect(new Set(words).size).toBe(1)
    expect(await Promise.all([countOf('takes'), countOf('documents'), countOf('events')])).toEqual(before)
    expect((await upload({ takeId: hidden, placeSec: 0, rate: 1 }, ines)).status).toBe(201)
  })

  it.each([
    'x',
    '[]',
    '{"takeId":"x","placeSec":0,"rate":1}',
    '{"placeSec":0,"rate":1}',
    JSON.stringify({ takeId: newId(), placeSec: 0, rate: 0 }),
    JSON.stringify({ takeId: newId(), placeSec: -61, rate: 1 }),
    JSON.stringify({ takeId: newId(), placeSec: 0, rate: 1, reach: 'group' })
  ])('is refused when it says %s', async (over) => {
    const { status, body } = await upload(over)
    expect([status, (body as { errors: { path: string }[] }).errors[0]?.path]).toEqual([422, 'over'])
  })
})
