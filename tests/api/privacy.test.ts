// Nothing private in anything that others are sent (trust.md 12, 17, 19, 42, 44; ASVS V8.2.2, V14.2.6, V15.3.1, V15.4.2, V16.2).
import request from 'supertest'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { takeRelations } from '@server/access/take-relations'
import { createTakesRepo } from '@server/repositories/takes.repo'
import { allows } from '@shared/access/permissions'
import type { Role } from '@shared/contracts/common'
import { commentRoutes } from '@shared/contracts/comments'
import { groupEventRoutes } from '@shared/contracts/group-events'
import { groupRoutes, invitationRoutes } from '@shared/contracts/groups'
import { allRoutes } from '@shared/contracts/registry'
import { addressOf } from '@shared/contracts/route'
import { type Reach, takeRoutes } from '@shared/contracts/takes'
import { cookieOf, type Method, startApp, type TestApp } from '../support/app.ts'
import {
  buildComment,
  buildGroup,
  buildInvitation,
  buildLink,
  buildRecording,
  buildReply,
  buildSession,
  buildTake,
  buildTune,
  demoGroup,
  newId
} from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { type AskerKey, idOf, otherGroup, type PersonKey } from '../support/people.ts'

let app: TestApp
beforeAll(async () => {
  app = await startApp()
})
afterAll(() => app?.close())

const canary = 'zq-canary-71'
const comment = () => ({ id: newId(), kind: 'good' as const, text: 'Yes.', startSec: 0, endSec: 1 })

/** Every GET there is (and the shape of every answer), asked with every id there is. */
const crawl = async (key: AskerKey, ids: Record<string, string[]>): Promise<string[]> => {
  const person = await app.as(key)
  const leaks: string[] = []
  const isStranger = ['stranger', 'neighbour', 'sten', 'anonymous'].includes(key)
  for (const { name, def } of allRoutes()) {
    const params = [...def.path.matchAll(/:(\w+)/g)].map((match) => match[1] ?? '')
    let addresses: Record<string, string>[] = [{}]
    for (const param of params)
      addresses = addresses.flatMap((one) => (ids[param] ?? ['0']).map((id) => ({ ...one, [param]: id })))
    // What would change something is sent empty, and only by strangers: it fails, and its words must not tell anything.
    if (def.method !== 'GET' && (!isStranger || name === 'account.signOut')) continue
    for (const one of addresses) {
      const target = addressOf(def, { params: one, query: { after: '0' } }).replace('{*path}', '')
      const test = person.send(def.method.toLowerCase() as Method, target)
      const response = await (def.method === 'GET' ? test : test.send({}))
      if (`${response.text} ${JSON.stringify(response.headers)}`.includes(canary)) leaks.push(`${name} ${target}`)
    }
  }
  return leaks
}

describe('a private take', () => {
  it('is in no answer to anybody outside, by any route (17, V8.2.2, V14.2.6)', async () => {
    const tuneId = await buildTune(app, { title: `${canary} tune` })
    const takeId = await buildTake(app, { by: 'ines', reach: 'only me', title: `${canary} take`, tuneId })
    const commentId = await buildComment(app, { takeId, by: 'ines', text: `${canary} words` })
    const replyId = await buildReply(app, { commentId, by: 'ines', text: `${canary} answer` })
    const sessionId = await buildSession(app, { takeId })
    const recordingId = await buildRecording(app)
    const { id: invitationId } = await buildInvitation(app)
    await app
      .db('groups')
      .where({ id: demoGroup.id })
      .update({ name: `${canary} group` })
    const linkId = await buildLink(app, { groupId: demoGroup.id, teacher: 'mara', student: 'pell' })
    const ids = {
      groupId: [demoGroup.id, otherGroup.id],
      tuneId: [tuneId],
      takeId: [takeId],
      commentId: [commentId],
      replyId: [replyId],
      sessionId: [sessionId],
      recordingId: [recordingId],
      invitationId: [invitationId],
      linkId: [linkId],
      userId: [idOf('ines')],
      index: ['0']
    }
    for (const key of ['stranger', 'neighbour', 'sten', 'anonymous'] as const)
      expect([key, await crawl(key, ids)]).toEqual([key, []])
    // The crawl does find it where it may be found.
    expect(await crawl('ines', ids)).toEqual(expect.arrayContaining([expect.stringContaining('takes.get')]))
    await app.db('groups').where({ id: demoGroup.id }).update({ name: demoGroup.name })
    await app.db('tunes').where({ id: tuneId }).update({ title: 'Plain' })
    // Within the group: only the owner's card says that it is there, and nobody hears or reads any of it.
    const inside = await crawl('jory', ids)
    expect(inside).toEqual([])
    expect(await crawl('mara', ids)).toEqual([`takes.list /api/groups/${demoGroup.id}/takes?after=0`])
  })

  it('is counted in nothing that others see', async () => {
    const groupId = await buildGroup(app)
    await buildTake(app, { groupId, by: 'ines', reach: 'only me' })
    const seen = async (key: PersonKey) => {
      const { items, cards } = await must(await app.as(key), takeRoutes.list, { params: { groupId }, query: {} })
      return [items.length, cards.length]
    }
    expect(await seen('ines')).toEqual([1, 0])
    expect(await seen('tomas')).toEqual([0, 0])
    expect(await seen('jory')).toEqual([0, 0])
    expect(await seen('mara')).toEqual([0, 1])
  })

  it('shows only to its uploader who else was named', async () => {
    const takeId = await buildTake(app, { by: 'ines', reach: 'named', named: ['tomas', 'aude'] })
    const named = async (key: PersonKey) =>
      (await must(await app.as(key), takeRoutes.get, { params: { takeId } })).named.length
    expect([await named('ines'), await named('tomas'), await named('aude')]).toEqual([2, 0, 0])
  })
})

describe('the list of takes', () => {
  it('has in SQL exactly the takes that the relations let hear, for every role, reach, link, name and age', async () => {
    const repo = createTakesRepo(app.db)
    const roles: (Role | null)[] = ['owner', 'teacher', 'member', 'listener', null]
    const reaches: Reach[] = ['only me', 'my teachers', 'named', 'group']
    let combinations = 0
    for (const role of roles)
      for (const isLinked of [false, true])
        for (const isMinor of [false, true]) {
          const uploader: PersonKey = isMinor ? 'wren' : 'ines'
          const groupId = await buildGroup(app, { [uploader]: 'member', ...(role ? { tomas: role } : {}) })
          if (isLinked) await buildLink(app, { groupId, teacher: 'tomas', student: uploader })
          for (const reach of reaches)
            for (const isNamed of [false, true])
              for (const isOwn of [false, true]) {
                const by: PersonKey = isOwn ? 'tomas' : uploader
                const takeId = await buildTake(app, { groupId, by, reach, named: isNamed ? ['tomas'] : [] })
                const held = takeRelations({
                  groupId,
                  role,
                  isUploader: isOwn,
                  reach,
                  isNamed,
                  isLinkedTeacher: isLinked && !isOwn,
                  isUploaderMinor: isMinor && !isOwn
                })
                const listed = await repo.audible(idOf('tomas'), groupId, { after: null, limit: 100 })
                const label = JSON.stringify({ role, isLinked, isMinor, reach, isNamed, isOwn })
                expect([label, listed.some((take) => take.id === takeId)]).toEqual([label, allows('take:read', held)])
                combinations += 1
              }
        }
    expect(combinations).toBe(5 * 2 * 2 * 4 * 2 * 2)
  })

  it('comes in pages that together are the whole, once each', async () => {
    const groupId = await buildGroup(app)
    for (let n = 0; n < 120; n += 1) await buildTake(app, { groupId, by: 'ines', reach: n % 3 ? 'group' : 'only me' })
    const ids: string[] = []
    let cursor: string | undefined
    do {
      const page = await must(await app.as('tomas'), takeRoutes.list, { params: { groupId }, query: { cursor } })
      ids.push(...page.items.map(({ id }) => id))
      cursor = page.nextCursor ?? undefined
    } while (cursor)
    expect([ids.length, new Set(ids).size]).toEqual([80, 80])
  })
})

describe('the roster', () => {
  it('tells a member of a group that hides it only of the owner and those they are linked with (44)', async () => {
    const groupId = await buildGroup(app)
    await buildLink(app, { groupId, teacher: 'jory', student: 'tomas' })
    await app.db('groups').where({ id: groupId }).update({ is_roster_shown: false })
    const seen = async (key: PersonKey) =>
      (await must(await app.as(key), groupRoutes.people, { params: { groupId } })).items
    expect((await seen('tomas')).map(({ id }) => id).sort()).toEqual([idOf('mara'), idOf('jory'), idOf('tomas')].sort())
    expect((await seen('mara')).length).toBe(7)
    // Who is a minor is for those who answer for them; an e-mail is for nobody.
    expect((await seen('mara')).find(({ id }) => id === idOf('wren'))).toMatchObject({ isMinor: true })
    await app.db('groups').where({ id: groupId }).update({ is_roster_shown: true })
    const all = await seen('pell')
    expect(all.some(({ isMinor, hasGuardianConsent }) => isMinor || hasGuardianConsent)).toBe(false)
    expect(JSON.stringify(all)).not.toContain('@')
  })
})

describe('a removed person (19, V15.4.2)', () => {
  it('writes nothing more once the removal was acknowledged, however the two race', async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const [mara, tomas] = [await app.as('mara'), await app.as('tomas')]
    const statuses = new Set<number>()
    const at = { isRemoved: false, isOver: false }
    const after: number[] = []
    const writer = async () => {
      while (!at.isOver) {
        const begun = at.isRemoved
        const { status } = await callRoute(tomas, commentRoutes.create, { params: { takeId }, body: comment() })
        statuses.add(status)
        if (begun) after.push(status)
      }
    }
    const writers = [writer(), writer(), writer(), writer()]
    await new Promise((some) => setTimeout(some, 120))
    await must(mara, groupRoutes.removePerson, { params: { groupId, userId: idOf('tomas') } })
    at.isRemoved = true
    const [before] = (await app.db('comments').where({ take_id: takeId }).count('id as count')) as unknown as {
      count: number
    }[]
    await new Promise((some) => setTimeout(some, 120))
    at.isOver = true
    await Promise.all(writers)
    const [end] = (await app.db('comments').where({ take_id: takeId }).count('id as count')) as unknown as {
      count: number
    }[]
    expect(end?.count).toBe(before?.count)
    expect([...statuses].filter((status) => status !== 201 && status !== 404)).toEqual([])
    expect(after.length).toBeGreaterThan(0)
    expect(new Set(after)).toEqual(new Set([404]))
  })

  it('never waits in a circle with those who write, delete and leave at the same time', async () => {
    const groupId = await buildGroup(app)
    const [mara, ines, tomas, jory] = [
      await app.as('mara'),
      await app.as('ines'),
      await app.as('tomas'),
      await app.as('jory')
    ]
    for (let round = 0; round < 4; round += 1) {
      const takeId = await buildTake(app, { groupId, by: 'ines' })
      const commentId = await buildComment(app, { takeId, by: 'ines' })
      const reply = { id: newId(), text: 'Yes.' }
      const mark = { kind: 'setMark' as const, mark: { bar: 1, formBar: 1, newPass: true } }
      const answers = await Promise.all([
        ...Array.from({ length: 4 }, () =>
          callRoute(tomas, commentRoutes.create, { params: { takeId }, body: comment() })
        ),
        callRoute(jory, commentRoutes.reply, { params: { commentId }, body: reply }),
        callRoute(ines, commentRoutes.update, { params: { commentId }, body: { text: 'Anew.' } }),
        ines.send('patch', `/api/takes/${takeId}/bar-map`).send({ id: newId(), baseRevision: 0, operations: [mark] }),
        callRoute(ines, takeRoutes.remove, { params: { takeId } }),
        callRoute(mara, groupRoutes.setRole, { params: { groupId, userId: idOf('pell') }, body: { role: 'listener' } }),
        callRoute(mara, groupRoutes.setRole, { params: { groupId, userId: idOf('pell') }, body: { role: 'member' } })
      ])
      expect(answers.map(({ status }) => status).filter((status) => ![200, 201, 404].includes(status))).toEqual([])
    }
    expect(app.logs.errors()).toEqual([])
  })

  it('leaves a group with an owner, whoever goes at once', async () => {
    const groupId = await buildGroup(app, { mara: 'owner', jory: 'owner', ines: 'member' })
    const [mara, jory] = [await app.as('mara'), await app.as('jory')]
    const statuses = (
      await Promise.all([
        callRoute(mara, groupRoutes.leave, { params: { groupId } }),
        callRoute(jory, groupRoutes.leave, { params: { groupId } })
      ])
    ).map(({ status }) => status)
    expect(statuses.sort()).toEqual([200, 409])
  })
})

describe('an invitation link (12, V6.4.1, V6.5, V2.3.4)', () => {
  it('makes one member of fifty tries at once', async () => {
    const groupId = await buildGroup(app, { mara: 'owner' })
    const { token } = await buildInvitation(app, { groupId, role: 'listener' })
    const people = await Promise.all((['ines', 'tomas', 'pell', 'aude', 'stranger'] as const).map((key) => app.as(key)))
    const tries = Array.from({ length: 50 }, (_, n) => people[n % people.length] ?? people[0]!)
    const answers = await Promise.all(
      tries.map((person) => callRoute(person, invitationRoutes.accept, { body: { token } }))
    )
    expect(answers.filter(({ status }) => status === 200).length).toBe(1)
    expect(answers.filter(({ status }) => status >= 500)).toEqual([])
    expect(await app.db('memberships').where({ group_id: groupId }).select('role')).toHaveLength(2)
    expect(answers.find(({ status }) => status === 200)?.body).toMatchObject({ id: groupId, role: 'listener' })
  })
  it('has a secret of 256 bits that is told once and kept only as a hash', async () => {
    const mara = await app.as('mara')
    const made = await must(mara, invitationRoutes.create, {
      params: { groupId: demoGroup.id },
      body: { id: newId(), role: 'member', note: '' }
    })
    expect(Buffer.from(made.token, 'base64url').length).toBe(32)
    const row = await app.db('invitations').where({ id: made.id }).first()
    expect(JSON.stringify(row)).not.toContain(made.token)
    const { response } = await callRoute(mara, invitationRoutes.list, { params: { groupId: demoGroup.id } })
    expect(response.text).not.toContain(made.token)
  })
  it('ends by expiry, by being taken back and by use, and says the same each time', async () => {
    const mara = await app.as('mara')
    const old = await buildInvitation(app, { expiresAt: new Date(Date.now() - 1000) })
    const back = await buildInvitation(app)
    await must(mara, invitationRoutes.revoke, { params: { invitationId: back.id } })
    const stranger = await app.as('stranger')
    for (const token of [old.token, back.token, 'x'.repeat(43)]) {
      const look = await callRoute(stranger, invitationRoutes.look, { body: { token } })
      const accept = await callRoute(stranger, invitationRoutes.accept, { body: { token } })
      expect([look.status, accept.status, look.problem.detail]).toEqual([410, 410, accept.problem.detail])
    }
  })
  it('is bound to its group and role, and teachers invite neither owners nor teachers', async () => {
    const jory = await app.as('jory')
    for (const role of ['owner', 'teacher'] as const) {
      const made = await callRoute(jory, invitationRoutes.create, {
        params: { groupId: demoGroup.id },
        body: { id: newId(), role, note: '' }
      })
      expect(made.status).toBe(403)
    }
  })
  it('brings a new person into the group as they open their account, or makes no account', async () => {
    const { token } = await buildInvitation(app, { role: 'member' })
    const body = (id: string) => ({
      id,
      name: 'New',
      email: `${id}@new.example`,
      password: 'lamps on the pier',
      invitation: token
    })
    const [first, second] = [newId(), newId()]
    const send = (id: string) => request(app.url).post('/api/sign-up').set('Origin', app.url).send(body(id))
    const came = await send(first)
    expect(came.body).toMatchObject({ memberships: [{ groupId: demoGroup.id, role: 'member' }] })
    expect(cookieOf(came)).toBeTruthy()
    expect((await send(second)).status).toBe(410)
    expect(await app.db('users').where({ id: second }).first('id')).toBeUndefined()
  })
})

describe('the audit log (42, V16.2.1, V16.3.1-V16.3.3, V16.4.2)', () => {
  const rowsSince = async (id: number) =>
    app
      .db('audit_log')
      .where('id', '>', id)
      .orderBy('id')
      .select('id', 'what', 'actor_id', 'object_id', 'group_id', 'address', 'request_id')
  const last = async (): Promise<number> => (await app.db('audit_log').orderBy('id', 'desc').first('id'))?.id ?? 0
  it('has exactly one row for each act, saying who, what and whence, and no secrets', async () => {
    const groupId = await buildGroup(app)
    const mara = await app.as('mara')
    const stranger = await app.as('stranger')
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const since = await last()
    await request(app.url)
      .post('/api/sign-in')
      .set('Origin', app.url)
      .send({ email: 'who@else.example', password: 'a wrong one' })
    const again = await app.signInAgain('pell')
    await again.send('post', '/api/sign-out')
    await callRoute(stranger, groupRoutes.get, { params: { groupId } })
    const invitation = newId()
    await must(mara, invitationRoutes.create, {
      params: { groupId },
      body: { id: invitation, role: 'member', note: '' }
    })
    await must(mara, invitationRoutes.revoke, { params: { invitationId: invitation } })
    await must(mara, groupRoutes.setRole, { params: { groupId, userId: idOf('pell') }, body: { role: 'listener' } })
    await must(mara, groupRoutes.removePerson, { params: { groupId, userId: idOf('pell') } })
    await must(mara, takeRoutes.remove, { params: { takeId } })
    const rows = await rowsSince(since)
    expect(rows.map(({ what, actor_id: who }) => [what, who])).toEqual([
      ['sign-in-failed', null],
      ['sign-in', idOf('pell')],
      ['sign-out', idOf('pell')],
      ['access-denied', idOf('stranger')],
      ['invitation-made', idOf('mara')],
      ['invitation-revoked', idOf('mara')],
      ['role-changed', idOf('mara')],
      ['person-removed', idOf('mara')],
      ['take-deleted', idOf('mara')]
    ])
    for (const row of rows)
      expect([row.address, row.request_id]).toEqual([expect.stringMatching(/127\.0\.0\.1/), expect.any(String)])
    expect(JSON.stringify(rows)).not.toContain('a wrong one')
  })
  it('cannot be changed or shortened', async () => {
    const id = await last()
    await expect(app.db('audit_log').where({ id }).update({ what: 'nothing' })).rejects.toThrow('only ever added to')
    await expect(app.db('audit_log').where({ id }).delete()).rejects.toThrow('only ever added to')
    await expect(app.db.raw('truncate audit_log')).rejects.toThrow('only ever added to')
  })
})

describe('events of a take that somebody may not hear', () => {
  it('keep their number and say nothing else', async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines', reach: 'only me' })
    await must(await app.as('ines'), commentRoutes.create, { params: { takeId }, body: comment() })
    const list = async (key: PersonKey) =>
      (await must(await app.as(key), groupEventRoutes.list, { params: { groupId }, query: { after: '0' } })).items
    expect(await list('ines')).toMatchObject([{ seq: 1, type: 'comment:created', takeId }])
    expect(await list('tomas')).toMatchObject([{ seq: 1, type: 'hidden', takeId: null, objectId: null, actorId: null }])
  })
})
