// Passages as files: asked for, made by the real worker, had by nobody but the one who asked (trust.md 16-18, 36, 37, 44).
import { existsSync, readdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Clip, clipRoutes, type ClipSettings } from '@shared/contracts/clips'
import { addressOf } from '@shared/contracts/route'
import { createClipJob } from '@server/jobs/clip.job'
import { createAccessRepo } from '@server/repositories/access.repo'
import { createClipsRepo } from '@server/repositories/clips.repo'
import { createDocumentsRepo } from '@server/repositories/documents.repo'
import { createTakesRepo } from '@server/repositories/takes.repo'
import { startApp, type TestApp } from '../support/app.ts'
import { buildClip, buildGroup, buildTake, clipSettings, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { decode, scratchFolder } from '../support/media.ts'
import type { PersonKey } from '../support/people.ts'
import { run, type Running } from '../support/process.ts'

let app: TestApp
let groupId: string
let worker: Running | null = null
beforeAll(async () => {
  app = await startApp({ bounds: { clipsUnderWay: 2, clipsPerPerson: 4 } })
  groupId = await buildGroup(app)
})
afterAll(async () => {
  await worker?.kill()
  await app?.close()
})

const startWorker = (): Running =>
  (worker = run('server/worker.ts', { DATABASE_URL: app.databaseUrl, STORAGE_DIR: app.storageDir }))
const order = async (by: PersonKey, takeId: string, settings: ClipSettings = clipSettings(), id = newId()) =>
  callRoute(await app.as(by), clipRoutes.create, { params: { takeId }, body: { id, place: null, settings } })
const clipOf = async (by: PersonKey, clipId: string): Promise<Clip> =>
  must(await app.as(by), clipRoutes.get, { params: { clipId } })
const filesOf = (takeId: string): string[] => {
  const folder = join(app.storageDir, 'takes', takeId, 'clips')
  return existsSync(folder) ? readdirSync(folder) : []
}
const workIn = (takeId: string): string[] =>
  readdirSync(join(app.storageDir, 'takes', takeId)).filter((name) => name.startsWith('.work-'))

const untilClip = async (by: PersonKey, clipId: string, isReached: (clip: Clip) => boolean): Promise<Clip> => {
  for (let tries = 0; tries < 1200; tries += 1) {
    const clip = await clipOf(by, clipId)
    if (isReached(clip)) return clip
    await sleep(50)
  }
  throw new Error(`still ${JSON.stringify(await clipOf(by, clipId))}\n${worker?.output().slice(-2000)}`)
}

describe('asking for a passage as a file', () => {
  it('is done once however often it is sent, and an id is taken from nobody', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const id = newId()
    const answers = await Promise.all([1, 2, 3].map(() => order('aude', takeId, clipSettings(), id)))
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201])
    expect((await order('aude', takeId, clipSettings({ rate: 0.75 }), id)).status).toBe(409)
    expect((await order('pell', takeId, clipSettings(), id)).status).toBe(409)
    const { items } = await must(await app.as('aude'), clipRoutes.list, { params: { takeId } })
    expect(items).toMatchObject([
      { id, takeId, state: 'waiting', durationSec: 2, settings: clipSettings(), bytes: null }
    ])
    expect((await must(await app.as('ines'), clipRoutes.list, { params: { takeId } })).items).toEqual([])
    expect((await callRoute(await app.as('aude'), clipRoutes.file, { params: { clipId: id } })).status).toBe(409)
  })

  it('is refused where it cannot be met', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const click = { pattern: 'every beat', subdivision: 1, silence: null } as const
    const whole = { startSec: 0, endSec: 21_000 }
    for (const [more, path] of [
      [{ click }, 'settings.click'],
      [{ countIn: 'one bar' }, 'settings.countIn'],
      [{ span: { startSec: 20_000, endSec: 20_001 } }, 'settings.span.startSec']
    ] as const) {
      const { status, problem } = await order('tomas', takeId, clipSettings(more))
      expect([status, problem.errors?.map((error) => error.path)]).toEqual([422, [path]])
    }
    await app.db('takes').where({ id: takeId }).update({ duration_sec: 301 })
    expect((await order('tomas', takeId, clipSettings({ span: whole, rate: 0.5 }))).status).toBe(422)
    expect((await order('tomas', takeId, clipSettings({ span: whole, rate: 0.51 }))).status).toBe(201)
    expect((await order('tomas', takeId)).status).toBe(201)
    expect((await order('tomas', takeId)).status).toBe(413)
    await app.db('takes').where({ id: takeId }).update({ state: 'working' })
    expect((await order('mara', takeId)).status).toBe(409)
  })
})

describe('a file of a passage', () => {
  it('is let go with its time, its take or the right to hear it', async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const mine = await buildClip(app, { takeId, by: 'ines' })
    const theirs = await buildClip(app, { takeId, by: 'pell' })
    const old = await buildClip(app, { takeId, by: 'ines', expiresAt: new Date(Date.now() - 1000) })
    writeFileSync(app.storage.clipPath(takeId, newId()), 'nobody knows it')
    expect((await callRoute(await app.as('ines'), clipRoutes.get, { params: { clipId: old } })).status).toBe(404)
    expect((await callRoute(await app.as('pell'), clipRoutes.file, { params: { clipId: theirs } })).status).toBe(200)
    await app.db('takes').where({ id: takeId }).update({ reach: 'only me' })
    expect((await callRoute(await app.as('pell'), clipRoutes.file, { params: { clipId: theirs } })).status).toBe(404)
    const job = createClipJob({
      databaseUrl: app.databaseUrl,
      clips: createClipsRepo(app.db),
      takes: createTakesRepo(app.db),
      access: createAccessRepo(app.db),
      documents: createDocumentsRepo(app.db),
      storage: app.storage,
      log: app.logs.log
    })
    await job.sweep(Date.now() + 1000, 500)
    expect(filesOf(takeId)).toEqual([mine])
    expect((await app.db('clips').where({ take_id: takeId }).select('id')).map(({ id }) => id)).toEqual([mine])
    expect((await (await app.as('ines')).send('delete', `/api/takes/${takeId}`)).status).toBe(200)
    expect([filesOf(takeId), await app.db('clips').where({ take_id: takeId }).select('id')]).toEqual([[], []])
  })

  it('comes once, whatever became of the worker on the way', { timeout: 180_000 }, async () => {
    const takeId = await buildTake(app, { groupId, by: 'ines', withMedia: true, title: 'Löw / Tide' })
    // What the tests above asked for needs no sound to be made.
    await app.db('clips').delete()
    const settings = clipSettings({ span: { startSec: 2, endSec: 3 }, rate: 0.2, semitones: 5 })
    const id = newId()
    expect((await order('mara', takeId, settings, id)).status).toBe(201)
    const first = startWorker()
    await untilClip('mara', id, ({ state, progress }) => state === 'working' && progress > 0.12)
    await first.kill('SIGKILL')
    startWorker()
    const clip = await untilClip('mara', id, ({ state }) => state === 'ready' || state === 'failed')
    expect(clip).toMatchObject({ state: 'ready', progress: 1, stage: null, fault: null, durationSec: 5 })
    expect(filesOf(takeId)).toEqual([id])
    const mara = await app.as('mara')
    const answer = await mara.send('get', addressOf(clipRoutes.file, { params: { clipId: id } })).responseType('blob')
    expect(answer.status).toBe(200)
    expect(answer.get('Content-Type')).toBe('audio/wav')
    expect(answer.get('X-Content-Type-Options')).toBe('nosniff')
    expect(answer.get('Content-Disposition')).toBe(
      `attachment; filename="L_w  Tide, 0.02.0 to 0.03.0, 20 _.wav"; filename*=UTF-8''L%C3%B6w%20%20Tide%2C%200.02.0%20to%200.03.0%2C%2020%20%25.wav`
    )
    const file = join(scratchFolder(), 'clip.wav')
    writeFileSync(file, answer.body as Buffer)
    expect((answer.body as Buffer).length).toBe(clip.bytes)
    expect(decode(file).length / 2).toBe(5 * 44_100)
    for (const other of ['ines', 'tomas'] as const)
      expect((await callRoute(await app.as(other), clipRoutes.file, { params: { clipId: id } })).status).toBe(404)
  })

  it('is not made any further once it is deleted', { timeout: 60_000 }, async () => {
    if (!worker || worker.child.exitCode !== null) startWorker()
    const takeId = await buildTake(app, { groupId, by: 'ines', withMedia: true })
    const id = newId()
    const long = clipSettings({ span: { startSec: 0, endSec: 12 }, rate: 0.2, semitones: 5, format: 'm4a' })
    await order('jory', takeId, long, id)
    await untilClip('jory', id, ({ state, progress }) => state === 'working' && progress > 0.1)
    await must(await app.as('jory'), clipRoutes.remove, { params: { clipId: id } })
    while (workIn(takeId).length > 0) await sleep(50)
    expect(filesOf(takeId)).toEqual([])
    const next = newId()
    await order('jory', takeId, clipSettings({ format: 'm4a' }), next)
    expect(await untilClip('jory', next, ({ state }) => state !== 'waiting' && state !== 'working')).toMatchObject({
      state: 'ready'
    })
    const [left, right] = [0, 1].map((side) =>
      decode(app.storage.clipPath(takeId, next)).filter((_, at) => at % 2 === side)
    )
    // AAC has no sample-exact end: its last packet is whole.
    expect(Math.abs((left?.length ?? 0) / 44_100 - 2)).toBeLessThan(0.1)
    expect(right?.some((sample) => Math.abs(sample) > 0.01)).toBe(true)
  })
})
