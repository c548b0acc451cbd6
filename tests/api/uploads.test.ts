// Uploads: sizes, kinds, names, quotas, nothing left behind (ASVS V5.2, V5.3; trust.md 27, 32, 33, 35, 36).
import { existsSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { request as rawRequest } from 'node:http'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { recordingRoutes, takeRoutes } from '@shared/contracts/takes'
import { type Person, startApp, type TestApp } from '../support/app.ts'
import { buildGroup, demoGroup, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { makeLiveWebm, makeRecording, makeScratch, pluckedBass, sine } from '../support/media.ts'
import { until } from '../support/sockets.ts'

const limit = 400_000
let app: TestApp
let ines: Person
let folder: string
let wav: Buffer
beforeAll(async () => {
  app = await startApp({ bounds: { uploadBytes: limit, takesPerMember: 3, openRecordings: 2 } })
  ines = await app.as('ines')
  folder = makeScratch()
  wav = readFileSync(makeRecording(folder, 'a.wav', sine(110, 1, 8000)))
})
afterAll(async () => {
  rmSync(folder, { recursive: true, force: true })
  await app?.close()
})

const incoming = (): string[] => readdirSync(join(app.storageDir, 'incoming'), { recursive: true }).map(String)
const takeFolders = (): string[] =>
  existsSync(join(app.storageDir, 'takes')) ? readdirSync(join(app.storageDir, 'takes')) : []
const fields = (id = newId()) => ({ id, title: 'Uploaded', reach: 'group', agreed: 'yes' })
const upload = (groupId: string, bytes: Buffer, name = 'a.wav', over: object = {}, person = ines) =>
  person
    .send('post', `/api/groups/${groupId}/takes`)
    .field({ ...fields(), ...over })
    .attach('recording', bytes, name)

describe('an upload', () => {
  it('becomes a waiting take with its bytes as they were, once however often it is sent', async () => {
    const groupId = await buildGroup(app)
    const id = newId()
    const answers = await Promise.all([1, 2, 3].map(() => upload(groupId, wav, 'a.wav', { id })))
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201])
    expect(answers[0]?.body).toMatchObject({
      id,
      state: 'waiting',
      progress: 0,
      tuningCents: null,
      uploader: { name: 'Inés Baltar' }
    })
    expect(readFileSync(join(app.storageDir, 'takes', id, 'original')).equals(wav)).toBe(true)
    expect(await app.db('takes').where({ id })).toHaveLength(1)
    expect(await app.db('events').where({ object_id: id })).toHaveLength(1)
    await app.db('takes').where({ id }).update({ tuning_cents: -18.3 })
    expect(await must(ines, takeRoutes.get, { params: { takeId: id } })).toMatchObject({ tuningCents: -18.3 })
    await until(() => incoming().length === 0, 'nothing to be left')
    expect((await upload(groupId, wav, 'a.wav', { id }, await app.as('tomas'))).status).toBe(409)
    expect(readFileSync(join(app.storageDir, 'takes', id, 'original')).equals(wav)).toBe(true)
  })

  it('of one byte over the limit is refused, of exactly the limit is looked at (32, V5.2.1)', async () => {
    const groupId = await buildGroup(app)
    const before = takeFolders()
    const [over, just] = [await upload(groupId, Buffer.alloc(limit + 1)), await upload(groupId, Buffer.alloc(limit))]
    expect([over.status, (over.body as { type: string }).type]).toEqual([413, '/problems/too-large'])
    expect(just.status).toBe(415)
    await until(() => incoming().length === 0, 'nothing to be left')
    expect(takeFolders()).toEqual(before)
  })

  it('that is broken off leaves nothing', async () => {
    const { port } = app.http.address() as AddressInfo
    for (const wait of [0, 30, 120]) {
      const asked = rawRequest({
        port,
        method: 'POST',
        path: `/api/groups/${demoGroup.id}/takes`,
        headers: {
          Cookie: ines.cookie,
          Origin: app.url,
          'Content-Type': 'multipart/form-data; boundary=xx',
          'Content-Length': 300_000
        }
      })
      asked.on('error', () => undefined)
      asked.write('--xx\r\nContent-Disposition: form-data; name="recording"; filename="a.wav"\r\n\r\n')
      asked.write(Buffer.alloc(100_000))
      await new Promise((some) => setTimeout(some, wait))
      asked.destroy()
      await until(() => incoming().length === 0, 'the folder to be gone')
    }
    expect((await ines.send('get', '/api/me')).status).toBe(200)
  })

  it.each([
    ['text', Buffer.from('only words, no sound')],
    ['nothing', Buffer.alloc(0)],
    ['a playlist', Buffer.from('#EXTM3U\n#EXTINF:1,\nfile:///etc/passwd\n')],
    ['an ffconcat list', Buffer.from("ffconcat version 1.0\nfile '/etc/passwd'\n")],
    ['a page', Buffer.from('<!doctype html><script>1</script>')],
    ['a drawing', Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" onload="1"/>')],
    ['an archive', Buffer.from('504b0304140000000800', 'hex')]
  ])('of %s under an audio name gets a sentence and leaves nothing (33, V5.2.2)', async (_, bytes) => {
    const before = takeFolders()
    for (const name of ['a.mp3', 'a.wav']) {
      const response = await upload(demoGroup.id, bytes, name)
      expect(response.status).toBe(415)
      expect((response.body as { detail: string }).detail).toMatch(/^[A-Z].*\.$/)
      expect(response.text).not.toMatch(/ffprobe|passwd|\/tmp|incoming/)
    }
    await until(() => incoming().length === 0, 'nothing to be left')
    expect(takeFolders()).toEqual(before)
  })

  it('is stored under a name of ours, whatever it was called (27, 36, V5.3.2)', async () => {
    const names = [
      '-i',
      ';id',
      '$(id).wav',
      'a\nb.wav',
      `${'n'.repeat(251)}.wav`,
      '\u202egpj.wav',
      '../../etc/passwd',
      '..%2f..%2fx',
      'a\\b.wav',
      '/abs.wav'
    ]
    for (const name of names) {
      const groupId = await buildGroup(app)
      const response = await upload(groupId, wav, name)
      expect([name, response.status]).toEqual([name, 201])
      const { id } = response.body as { id: string }
      expect(readdirSync(join(app.storageDir, 'takes', id))).toEqual(['original'])
      expect(response.text).not.toContain('passwd')
    }
    await until(() => incoming().length === 0, 'nothing to be left')
    expect(readdirSync(app.storageDir).sort()).toEqual(['build', 'incoming', 'takes'])
  })

  it('needs every field, the agreement too, and no more than its own', async () => {
    const groupId = await buildGroup(app)
    for (const over of [
      { agreed: 'no' },
      { reach: 'everybody' },
      { title: '' },
      { id: 'x' },
      { tuneId: newId() },
      { id: '../../x' }
    ])
      expect([over, (await upload(groupId, wav, 'a.wav', over)).status]).toEqual([over, 422])
    const noFile = await ines.send('post', `/api/groups/${groupId}/takes`).field(fields())
    expect(noFile.status).toBe(422)
    const wrongField = await ines
      .send('post', `/api/groups/${groupId}/takes`)
      .field(fields())
      .attach('other', wav, 'a.wav')
    expect(wrongField.status).toBe(400)
    const two = await ines
      .send('post', `/api/groups/${groupId}/takes`)
      .field(fields())
      .attach('recording', wav, 'a.wav')
      .attach('recording', wav, 'b.wav')
    expect(two.status).toBe(400)
    const notMultipart = await ines.send('post', `/api/groups/${groupId}/takes`).send(fields())
    expect(notMultipart.status).toBe(422)
    await until(() => incoming().length === 0, 'nothing to be left')
    const forged = await upload(groupId, wav, 'a.wav', { uploaderId: newId(), state: 'ready', __proto__: 'x' })
    expect(forged.body).toMatchObject({ state: 'waiting', uploader: { name: 'Inés Baltar' } })
  })

  it('stops at what a member may keep in a group (35, V5.2.4)', async () => {
    const groupId = await buildGroup(app)
    const statuses: number[] = []
    for (let n = 0; n < 4; n += 1) statuses.push((await upload(groupId, wav)).status)
    expect(statuses).toEqual([201, 201, 201, 413])
    expect((await upload(groupId, wav, 'a.wav', {}, await app.as('tomas'))).status).toBe(201)
    const [parallel] = [await buildGroup(app)]
    const many = await Promise.all(Array.from({ length: 6 }, () => upload(parallel, wav)))
    expect(many.filter(({ status }) => status === 201).length).toBe(3)
    expect(await app.db('takes').where({ group_id: parallel })).toHaveLength(3)
    await until(() => incoming().length === 0, 'nothing to be left')
  })
})

describe('a recording made in the browser', () => {
  const put = (id: string, index: number, bytes: Buffer, person = ines) =>
    person
      .send('put', `/api/recordings/${id}/pieces/${index}`)
      .set('Content-Type', 'application/octet-stream')
      .send(bytes)
  const start = async (groupId: string) =>
    (await must(ines, recordingRoutes.start, { params: { groupId }, body: { id: newId(), mime: 'audio/webm' } })).id
  const finish = (recordingId: string, pieces: number, id = newId()) =>
    callRoute(ines, recordingRoutes.finish, {
      params: { recordingId },
      body: { ...fields(id), reach: 'group', agreed: 'yes', pieces }
    })

  it('arrives in pieces, in order, each twice or at once, and is finished once', async () => {
    const whole = readFileSync(makeLiveWebm(folder, pluckedBass(2)))
    const id = await start(await buildGroup(app))
    const cut = Math.floor(whole.length / 3)
    const pieces = [whole.subarray(0, cut), whole.subarray(cut, 2 * cut), whole.subarray(2 * cut)]
    expect((await put(id, 1, pieces[1] as Buffer)).status).toBe(409)
    for (const [index, piece] of pieces.entries()) {
      const twice = await Promise.all([put(id, index, piece), put(id, index, piece)])
      expect(twice.map(({ status, body }) => [status, (body as { nextPiece: number }).nextPiece])).toEqual([
        [200, index + 1],
        [200, index + 1]
      ])
    }
    expect((await finish(id, 5)).status).toBe(409)
    const takeId = newId()
    const ends = await Promise.all([finish(id, 3, takeId), finish(id, 3, takeId), finish(id, 3, takeId)])
    expect(ends.map(({ status, body }) => [status, body.id])).toEqual([
      [201, takeId],
      [201, takeId],
      [201, takeId]
    ])
    expect(readFileSync(join(app.storageDir, 'takes', takeId, 'original')).equals(whole)).toBe(true)
    expect(await app.db('takes').where({ id: takeId })).toHaveLength(1)
    await until(() => incoming().length === 0, 'nothing to be left')
    expect((await put(id, 3, pieces[0] as Buffer)).status).toBe(409)
  })

  it('holds to the size of a piece and of the whole, and answers while it is still being sent', async () => {
    const id = await start(await buildGroup(app))
    const answer = await put(id, 0, Buffer.alloc(8 * 1024 ** 2 + 1))
    expect([answer.status, (answer.body as { type: string }).type]).toEqual([413, '/problems/too-large'])
    expect(incoming().filter((name) => name.includes('.part') || name.includes('000000'))).toEqual([])
    await put(id, 0, Buffer.alloc(limit))
    expect((await put(id, 1, Buffer.alloc(10))).status).toBe(413)
    await must(ines, recordingRoutes.drop, { params: { recordingId: id } })
    await until(() => incoming().length === 0, 'nothing to be left')
  })

  it('gets a sentence when it cannot be read, and nothing of it becomes a take', async () => {
    const id = await start(await buildGroup(app))
    await put(id, 0, Buffer.from('no sound at all'))
    const { status, problem } = await finish(id, 1)
    expect([status, problem.detail]).toEqual([415, expect.stringMatching(/^[A-Z].*\.$/)])
    await must(ines, recordingRoutes.drop, { params: { recordingId: id } })
  })

  it('may be open only so many at a time (35)', async () => {
    const groupId = await buildGroup(app)
    const begun = await Promise.all(
      [1, 2, 3, 4].map(() =>
        callRoute(ines, recordingRoutes.start, { params: { groupId }, body: { id: newId(), mime: 'audio/webm' } })
      )
    )
    expect(begun.filter(({ status }) => status === 201).length).toBe(2)
    for (const { status, body } of begun)
      if (status === 201) await must(ines, recordingRoutes.drop, { params: { recordingId: body.id } })
  })

  it('is nothing any more to who has left the group', async () => {
    const groupId = await buildGroup(app)
    const id = await start(groupId)
    await must(
      ines,
      { ...recordingRoutes.drop, method: 'POST', path: '/api/groups/:groupId/leave' },
      { params: { groupId } as never }
    )
    expect((await put(id, 0, Buffer.from('more'))).status).toBe(404)
    await app.db('recordings').where({ id }).delete()
  })
})

describe('deleting a take', () => {
  it('takes its files, comments and bar map with it (44, V14.2.7)', async () => {
    const groupId = await buildGroup(app)
    const { body } = await upload(groupId, wav)
    const { id } = body as { id: string }
    await ines.send('get', `/api/takes/${id}/bar-map`)
    await must(ines, takeRoutes.remove, { params: { takeId: id } })
    expect(existsSync(join(app.storageDir, 'takes', id))).toBe(false)
    for (const table of ['documents', 'comments', 'take_names'] as const)
      expect(await app.db(table).where({ take_id: id })).toEqual([])
  })
})

it('answered nothing with an error of ours', () => {
  expect(app.logs.errors()).toEqual([])
})
