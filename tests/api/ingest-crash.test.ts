// The real worker on the real queue: killed at several moments, one finished take; a silent file, one sentence.
import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type PiecesManifest, takeRoutes } from '@shared/contracts/takes'
import { type Person, startApp, type TestApp } from '../support/app.ts'
import { demoGroup, newId } from '../support/build.ts'
import { callRoute, must } from '../support/call.ts'
import { makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'
import { run, type Running } from '../support/process.ts'
import { collect, connected, socketFor, ask } from '../support/sockets.ts'

let app: TestApp
let ines: Person
let worker: Running | null = null
beforeAll(async () => {
  app = await startApp()
  ines = await app.as('ines')
})
afterAll(async () => {
  await worker?.kill()
  await app?.close()
})

const startWorker = (): Running =>
  (worker = run('server/worker.ts', { DATABASE_URL: app.databaseUrl, STORAGE_DIR: app.storageDir }))

const upload = async (path: string): Promise<string> => {
  const id = newId()
  const { status, text } = await ines
    .send('post', `/api/groups/${demoGroup.id}/takes`)
    .field({ id, title: 'Take', reach: 'group', agreed: 'yes' })
    .attach('recording', path)
  if (status !== 201) throw new Error(text)
  return id
}
const take = (takeId: string) => must(ines, takeRoutes.get, { params: { takeId } })

const untilState = async (takeId: string, isReached: (state: string, progress: number) => boolean): Promise<void> => {
  for (let tries = 0; tries < 1200; tries += 1) {
    const { state, progress } = await take(takeId)
    if (isReached(state, progress)) return
    await sleep(50)
  }
  throw new Error(`still ${JSON.stringify(await take(takeId))}\n${worker?.output().slice(-2000)}`)
}

describe('a worker that is killed', () => {
  it('leaves its take to the next one, however often: one finished take', { timeout: 180_000 }, async () => {
    const socket = await connected(socketFor(app.url, ines))
    await ask(socket, 'group:follow', { groupId: demoGroup.id })
    const progress = collect(socket, 'take:progress')
    const takeId = await upload(makeRecording(scratchFolder(), 'a.wav', pluckedBass(60)))
    const moments: ((state: string, fraction: number) => boolean)[] = [
      (state) => state === 'working',
      (state, fraction) => state === 'working' && fraction > 0.05,
      (state, fraction) => state === 'ready' || (state === 'working' && fraction > 0.5)
    ]
    for (const moment of moments) {
      const one = startWorker()
      await untilState(takeId, moment)
      await one.kill('SIGKILL')
    }
    startWorker()
    await untilState(takeId, (state) => state === 'ready' || state === 'failed')
    const done = await take(takeId)
    expect(done).toMatchObject({ state: 'ready', durationSec: 60, progress: 1, fault: null })
    const manifest: PiecesManifest = await must(ines, takeRoutes.pieces, { params: { takeId } })
    expect(manifest.pieces.reduce((sum, piece) => sum + piece.frames, 0)).toBe(manifest.totalFrames)
    expect(readdirSync(join(app.storageDir, 'takes', takeId)).sort()).toEqual(['media', 'original'])
    expect((await callRoute(ines, takeRoutes.audio, { params: { takeId } })).status).toBe(200)
    const ready = await app.db('events').where({ object_id: takeId, type: 'take:updated' })
    expect(ready).toHaveLength(1)
    expect(progress.some((one) => one.takeId === takeId && one.progress > 0)).toBe(true)
  })

  it('says in a sentence what is wrong with a silent recording and keeps none of it', { timeout: 60_000 }, async () => {
    if (!worker || worker.child.exitCode !== null) startWorker()
    const silence = ['-f', 'lavfi', '-i', 'anullsrc=r=8000:cl=mono', '-t', '3']
    const takeId = await upload(makeRecording(scratchFolder(), 's.wav', silence))
    await untilState(takeId, (state) => state === 'failed' || state === 'ready')
    expect(await take(takeId)).toMatchObject({ state: 'failed', fault: expect.stringMatching(/silent.*\.$/) })
    for (let tries = 0; tries < 40 && existsSync(join(app.storageDir, 'takes', takeId)); tries += 1) await sleep(50)
    expect(existsSync(join(app.storageDir, 'takes', takeId))).toBe(false)
    expect((await callRoute(ines, takeRoutes.retry, { params: { takeId } })).status).toBe(410)
    expect((await callRoute(ines, takeRoutes.audio, { params: { takeId } })).status).toBe(409)
    const others = await must(await app.as('tomas'), takeRoutes.list, { params: { groupId: demoGroup.id }, query: {} })
    expect(others.items.some(({ id }) => id === takeId)).toBe(false)
  })

  it('ends in order when it is asked to', async () => {
    const one = worker ?? startWorker()
    await sleep(500)
    await one.kill('SIGTERM')
    expect(one.child.exitCode).toBe(0)
    worker = null
  })
})
