// Edited things over HTTP: merge, conflict with both sides, undo and redo, nothing overwritten silently.
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { chartRoutes, tuneRoutes } from '@shared/contracts/tunes'
import type { ChartBody } from '@shared/music/types'
import { type Person, startApp, type TestApp } from '../support/app.ts'
import { buildTake, buildTune, demoGroup, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { idOf } from '../support/people.ts'

let app: TestApp
let ines: Person
let tomas: Person
beforeAll(async () => {
  app = await startApp()
  ines = await app.as('ines')
  tomas = await app.as('tomas')
})
afterAll(() => app?.close())

const twelve: ChartBody = {
  key: 'F major',
  meter: '4/4',
  tempo: null,
  cyclic: true,
  sections: [{ id: 'a', name: 'A', bars: ['F7', 'Bb7', 'F7', 'F7'] }],
  order: ['a']
}
const newTune = async (): Promise<{ tuneId: string }> => {
  const tune = await must(ines, tuneRoutes.create, {
    params: { groupId: demoGroup.id },
    body: { id: newId(), title: 'Slack Tide', chart: twelve }
  })
  return { tuneId: tune.id }
}
const setBar = (index: number, text: string) => ({ kind: 'setBar' as const, sectionId: 'a', index, text })
const edit = (
  person: Person,
  params: { tuneId: string },
  baseRevision: number,
  ...operations: ReturnType<typeof setBar>[]
) => callRoute(person, chartRoutes.edit, { params, body: { id: newId(), baseRevision, operations } })
const bars = (body: ChartBody) => body.sections[0]?.bars

describe('editing a chart', () => {
  it('merges edits of different bars made on the same revision', async () => {
    const params = await newTune()
    expect((await edit(ines, params, 1, setBar(0, 'Fmaj7'))).body).toMatchObject({ revision: 2, canUndo: true })
    const merged = await edit(tomas, params, 1, setBar(1, 'Bb13'))
    expect([merged.status, bars(merged.body.body)]).toEqual([200, ['Fmaj7', 'Bb13', 'F7', 'F7']])
  })

  it('answers 409 with both sides where the same bar was touched, and changes nothing', async () => {
    const params = await newTune()
    await edit(ines, params, 1, setBar(0, 'Fmaj7'))
    const refused = await edit(tomas, params, 1, setBar(0, 'F6'), setBar(3, 'C7'))
    expect(refused.status).toBe(409)
    expect(refused.problem).toMatchObject({
      type: '/problems/conflict',
      current: { revision: 2, body: { sections: [{ bars: ['Fmaj7', 'Bb7', 'F7', 'F7'] }] } },
      theirs: [{ revision: 2, authorId: idOf('ines'), operations: [setBar(0, 'Fmaj7')] }]
    })
    expect(bars((await must(tomas, chartRoutes.get, { params })).body)).toEqual(['Fmaj7', 'Bb7', 'F7', 'F7'])
  })

  it('lets exactly one of many through who change the same bar at once, and all who change their own', async () => {
    const params = await newTune()
    const same = await Promise.all(
      ['Fm7', 'F6', 'F9', 'F13', 'Fsus4', 'F'].map((chord, n) =>
        edit(n % 2 ? ines : tomas, params, 1, setBar(2, chord))
      )
    )
    expect(same.map(({ status }) => status).sort()).toEqual([200, 409, 409, 409, 409, 409])
    const winner = same.find(({ status }) => status === 200)
    const state = await must(ines, chartRoutes.get, { params })
    expect(state.body).toEqual(winner?.body.body)
    const own = await Promise.all([0, 1, 3].map((bar) => edit(bar % 2 ? ines : tomas, params, 2, setBar(bar, 'Eb7'))))
    expect(own.map(({ status }) => status)).toEqual([200, 200, 200])
    expect((await must(ines, chartRoutes.get, { params })).revision).toBe(5)
  })

  it('applies an edit once however often it is sent', async () => {
    const params = await newTune()
    const body = {
      id: newId(),
      baseRevision: 1,
      operations: [{ kind: 'insertBar' as const, sectionId: 'a', index: 0, text: 'C7' }]
    }
    const answers = await Promise.all(
      Array.from({ length: 5 }, () => callRoute(ines, chartRoutes.edit, { params, body }))
    )
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200, 200, 200])
    expect(bars((await must(ines, chartRoutes.get, { params })).body)).toEqual(['C7', 'F7', 'Bb7', 'F7', 'F7'])
    expect((await callRoute(tomas, chartRoutes.edit, { params, body })).problem.type).toBe('/problems/already-there')
  })

  it('names the operation and the bar that cannot be read', async () => {
    const params = await newTune()
    const { status, problem } = await edit(ines, params, 1, setBar(0, 'C7'), setBar(1, 'Hxq??'))
    expect([status, problem.errors?.[0]?.path.startsWith('operations.1')]).toEqual([422, true])
    expect(bars((await must(ines, chartRoutes.get, { params })).body)).toEqual(twelve.sections[0]?.bars)
  })

  it('refuses an edit on a revision that is not there yet', async () => {
    expect((await edit(ines, await newTune(), 7, setBar(0, 'C7'))).status).toBe(422)
  })

  it('takes at most one operation that reads the whole chart anew', async () => {
    const params = await newTune()
    const whole = { kind: 'replaceChart' as const, body: twelve }
    const meter = { kind: 'setMeter' as const, meter: '3/4' }
    const send = (operations: (typeof whole | typeof meter)[]) =>
      callRoute(ines, chartRoutes.edit, { params, body: { id: newId(), baseRevision: 1, operations } })
    expect((await send([whole, whole])).status).toBe(422)
    expect((await send([whole, meter])).status).toBe(422)
    expect((await send([whole])).status).toBe(200)
  })
})

describe('undo and redo', () => {
  const undo = (person: Person, params: { tuneId: string }) =>
    callRoute(person, chartRoutes.undo, { params, body: { id: newId() } })
  const redo = (person: Person, params: { tuneId: string }) =>
    callRoute(person, chartRoutes.redo, { params, body: { id: newId() } })

  it("take back one's own edits in turn and do them again, past what others did elsewhere", async () => {
    const params = await newTune()
    await edit(ines, params, 1, setBar(0, 'C7'))
    await edit(tomas, params, 2, setBar(3, 'G7'))
    await edit(ines, params, 3, setBar(1, 'D7'))
    const once = await undo(ines, params)
    expect([bars(once.body.body), once.body.canRedo]).toEqual([['C7', 'Bb7', 'F7', 'G7'], true])
    expect(bars((await undo(ines, params)).body.body)).toEqual(['F7', 'Bb7', 'F7', 'G7'])
    expect(bars((await redo(ines, params)).body.body)).toEqual(['C7', 'Bb7', 'F7', 'G7'])
    const all = await redo(ines, params)
    expect([bars(all.body.body), all.body.canRedo]).toEqual([['C7', 'D7', 'F7', 'G7'], false])
    expect(bars((await undo(ines, params)).body.body)).toEqual(['C7', 'Bb7', 'F7', 'G7'])
  })

  it('never take back what others did, and stop where others changed the same place since', async () => {
    const params = await newTune()
    expect((await undo(tomas, params)).problem.type).toBe('/problems/nothing-to-undo')
    await edit(ines, params, 1, setBar(0, 'C7'))
    await edit(tomas, params, 2, setBar(0, 'A7'))
    const refused = await undo(ines, params)
    expect(refused.status).toBe(409)
    expect(refused.problem).toMatchObject({ type: '/problems/conflict', theirs: [{ authorId: idOf('tomas') }] })
    expect(bars((await must(ines, chartRoutes.get, { params })).body)?.[0]).toBe('A7')
    expect(bars((await undo(tomas, params)).body.body)?.[0]).toBe('C7')
  })

  it('have nothing to do again once something new was done', async () => {
    const params = await newTune()
    await edit(ines, params, 1, setBar(0, 'C7'))
    await undo(ines, params)
    await edit(ines, params, 3, setBar(2, 'G7'))
    expect((await redo(ines, params)).problem.type).toBe('/problems/nothing-to-undo')
  })

  it('are done once however often they are sent', async () => {
    const params = await newTune()
    await edit(ines, params, 1, setBar(0, 'C7'))
    await edit(ines, params, 2, setBar(0, 'D7'))
    const id = newId()
    for (let n = 0; n < 3; n += 1) await callRoute(ines, chartRoutes.undo, { params, body: { id } })
    expect(bars((await must(ines, chartRoutes.get, { params })).body)?.[0]).toBe('C7')
  })
})

describe('a new tune', () => {
  it('is refused with a chart that cannot be read, naming the bar, and leaves nothing', async () => {
    const id = newId()
    const chart = { ...twelve, sections: [{ id: 'a', name: 'A', bars: ['F7', 'Hxq??'] }] }
    const refused = await callRoute(ines, tuneRoutes.create, {
      params: { groupId: demoGroup.id },
      body: { id, title: 'No', chart }
    })
    expect(refused.status).toBe(422)
    expect(refused.problem.errors?.[0]).toMatchObject({
      in: 'body',
      path: expect.stringMatching(/^chart\./),
      message: expect.stringContaining('Bar 2 of A')
    })
    expect((await callRoute(ines, tuneRoutes.get, { params: { tuneId: id } })).status).toBe(404)
  })
  it('is made once when it is sent many times at once', async () => {
    const body = { id: newId(), title: 'Once' }
    const made = await Promise.all(
      Array.from({ length: 5 }, () => callRoute(ines, tuneRoutes.create, { params: { groupId: demoGroup.id }, body }))
    )
    expect(made.map(({ status }) => status)).toEqual([201, 201, 201, 201, 201])
    expect(await app.db('events').where({ object_id: body.id })).toHaveLength(1)
  })
  it('opens its chart empty for two who look at once', async () => {
    const tuneId = await buildTune(app)
    const states = await Promise.all(
      [ines, tomas, ines, tomas].map((person) => must(person, chartRoutes.get, { params: { tuneId } }))
    )
    expect(new Set(states.map(({ id }) => id)).size).toBe(1)
  })
})

describe('editing a bar map', () => {
  it('merges lines apart and refuses the same line', async () => {
    const params = { takeId: await buildTake(app) }
    const anchor = (id: string, sec: number, bar: number) => ({
      kind: 'setAnchor' as const,
      anchor: { id, sec, position: { bar, beat: { n: 1, d: 1 } } }
    })
    const send = (person: Person, baseRevision: number, ...operations: ReturnType<typeof anchor>[]) =>
      callRoute(person, barMapRoutes.edit, { params, body: { id: newId(), baseRevision, operations } })
    const first = await send(ines, 0, anchor('one', 1, 1), anchor('nine', 17, 9))
    expect(first.status).toBe(200)
    const second = await send(tomas, 1, { ...anchor('nine', 17.5, 9) })
    expect(second.status).toBe(200)
    const third = await send(ines, 1, anchor('nine', 16.5, 9))
    expect([third.status, third.problem.type]).toEqual([409, '/problems/conflict'])
  })
})

it('answered nothing with an error of ours', () => {
  expect(app.logs.errors()).toEqual([])
})
