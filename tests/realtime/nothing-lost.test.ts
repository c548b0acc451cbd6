// The fault model: members write through a network that cuts at random while the server is killed and comes back. Then
// acknowledgements, database and everybody's view are compared (trust.md "Nothing lost").
import { setTimeout as sleep } from 'node:timers/promises'
import { io, type Socket } from 'socket.io-client'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { GroupEvent } from '@shared/contracts/group-events'
import { startApp, type TestApp } from '../support/app.ts'
import { buildComment, buildGroup, buildTake, newId } from '../support/build.ts'
import { startCuttingProxy } from '../support/cutting-proxy.ts'
import type { PersonKey } from '../support/people.ts'
import { freePort, run, type Running } from '../support/process.ts'
import { until } from '../support/sockets.ts'

let app: TestApp
beforeAll(async () => {
  app = await startApp()
})
afterAll(() => app?.close())

const writers: PersonKey[] = ['mara', 'jory', 'ines', 'tomas']
const each = 12
/** So many of the 48 have been acknowledged when the server is killed, and when it is ended in order. */
const killedAt = 10
const endedAt = 25

/** A client that never passes a gap: socket for waking up, catch-up for what is missing. */
const createView = (url: string, origin: string, cookie: string, groupId: string) => {
  const seen: GroupEvent[] = []
  let isRunning = false
  let isAskedAgain = false
  const last = () => seen.at(-1)?.seq ?? 0
  const take = (event: GroupEvent): void => {
    if (event.seq === last() + 1) seen.push(event)
    else if (event.seq > last() + 1) void catchUp()
  }
  const catchUp = async (): Promise<void> => {
    if (isRunning) {
      isAskedAgain = true
      return
    }
    isRunning = true
    try {
      const response = await fetch(`${url}/api/groups/${groupId}/events?after=${last()}`, {
        headers: { Cookie: cookie }
      })
      if (response.ok)
        for (const event of ((await response.json()) as { items: GroupEvent[] }).items)
          if (event.seq === last() + 1) seen.push(event)
    } catch {
      // Cut: the next wake-up asks again.
    } finally {
      isRunning = false
    }
    if (isAskedAgain) {
      isAskedAgain = false
      await catchUp()
    }
  }
  const socket: Socket = io(url, {
    transports: ['websocket'],
    forceNew: true,
    reconnectionDelay: 30,
    reconnectionDelayMax: 100,
    extraHeaders: { Cookie: cookie, Origin: origin }
  })
  socket.on('connect', () => {
    socket.emit('group:follow', { groupId }, () => void catchUp())
  })
  socket.on('group:event', take)
  return { seen, last, catchUp, close: () => socket.disconnect() }
}

describe('members who write through a network that cuts, to a server that is killed', () => {
  it('lose nothing, double nothing and end with one order for all', { timeout: 120_000 }, async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const cookies = new Map(await Promise.all(writers.map(async (key) => [key, (await app.as(key)).cookie] as const)))
    const port = await freePort()
    const env = { DATABASE_URL: app.databaseUrl, STORAGE_DIR: app.storageDir, PORT: String(port), HOST: '127.0.0.1' }
    const start = async (): Promise<Running> => {
      const server = run('server/main.ts', env)
      await until(
        () =>
          fetch(`http://127.0.0.1:${port}/healthz`).then(
            (answer) => answer.ok,
            () => false
          ),
        'the server'
      ).catch((error: unknown) => {
        throw new Error(`${String(error)}: ${server.output()}`)
      })
      return server
    }
    let server = await start()
    const proxy = await startCuttingProxy(
      () => port,
      () => 60 + Math.random() * 300
    )
    // The Host that the server sees is the proxy's.
    const views = writers.map((key) => createView(proxy.url, proxy.url, cookies.get(key) ?? '', groupId))
    const acknowledged = new Set<string>()
    const someAcknowledged = async (count: number): Promise<void> => {
      while (acknowledged.size < count) await sleep(5)
    }
    const sends = { all: 0, again: 0 }
    const write = async (key: PersonKey): Promise<void> => {
      for (let n = 0; n < each; n += 1) {
        const body = JSON.stringify({
          id: newId(),
          kind: 'good',
          text: `${key} ${n}`,
          startSec: n / 10,
          endSec: n / 10
        })
        for (let tries = 0; ; tries += 1) {
          sends.all += 1
          if (tries > 0) sends.again += 1
          const answer = await fetch(`${proxy.url}/api/takes/${takeId}/comments`, {
            method: 'POST',
            headers: { Cookie: cookies.get(key) ?? '', Origin: proxy.url, 'Content-Type': 'application/json' },
            body,
            signal: AbortSignal.timeout(4000)
          }).catch(() => null)
          if (answer?.status === 201) {
            const text = await answer.text().catch(() => null)
            if (text !== null) {
              acknowledged.add((JSON.parse(body) as { id: string }).id)
              break
            }
          } else if (answer && answer.status < 500) throw new Error(`${answer.status} ${await answer.text()}`)
          await sleep(40)
        }
      }
    }
    try {
      const writing = Promise.all(writers.map(write))
      await someAcknowledged(killedAt)
      await server.kill('SIGKILL')
      server = await start()
      await someAcknowledged(endedAt)
      await server.kill('SIGTERM')
      server = await start()
      await writing
      proxy.heal()
      const wanted = (await app.db('groups').where({ id: groupId }).first('last_seq'))?.last_seq
      await until(async () => {
        await Promise.all(views.map((view) => view.catchUp()))
        return views.every((view) => view.last() === wanted)
      }, 'everybody to have caught up')

      const rows = await app.db('comments').where({ take_id: takeId }).select('id', 'text')
      expect(rows.length).toBe(writers.length * each)
      expect(new Set(rows.map(({ id }) => id))).toEqual(acknowledged)
      expect(new Set(rows.map(({ text }) => text)).size).toBe(rows.length)
      const order = views[0]?.seen.map(({ seq, objectId }) => [seq, objectId])
      for (const view of views) expect(view.seen.map(({ seq, objectId }) => [seq, objectId])).toEqual(order)
      expect(views[0]?.seen.map(({ seq }) => seq)).toEqual(Array.from({ length: wanted ?? 0 }, (_, n) => n + 1))
      expect(new Set(views[0]?.seen.map(({ objectId }) => objectId))).toEqual(acknowledged)
      expect(views[0]?.seen.length).toBe(rows.length)
      // Otherwise nothing was tried.
      expect(proxy.cuts()).toBeGreaterThan(5)
      process.stdout.write(
        `nothing lost: ${rows.length} comments, ${sends.again} sent again, ${proxy.cuts()} cuts, 2 server ends\n`
      )
    } finally {
      for (const view of views) view.close()
      await proxy.close()
      await server.kill('SIGKILL')
    }
  })
})

describe('the sequence of a group', () => {
  it(
    'has no gaps and no doubles under twenty writers at once, and is caught up in pages',
    { timeout: 60_000 },
    async () => {
      const groupId = await buildGroup(app)
      const takeId = await buildTake(app, { groupId, by: 'ines' })
      const people = await Promise.all(writers.map((key) => app.as(key)))
      const post = (n: number) =>
        people[n % people.length]!.send('post', `/api/takes/${takeId}/comments`).send({
          id: newId(),
          kind: 'good',
          text: `${n}`,
          startSec: 0,
          endSec: 0
        })
      const answers = await Promise.all(
        Array.from({ length: 20 }, async (_, writer) => {
          const statuses: number[] = []
          for (let n = 0; n < 4; n += 1) statuses.push((await post(writer * 4 + n)).status)
          return statuses
        })
      )
      expect(new Set(answers.flat())).toEqual(new Set([201]))
      const all: GroupEvent[] = []
      for (;;) {
        const response = await people[0]!.send('get', `/api/groups/${groupId}/events?after=${all.at(-1)?.seq ?? 0}`)
        const { items, lastSeq } = response.body as { items: GroupEvent[]; lastSeq: number }
        all.push(...items)
        if (all.at(-1)?.seq === lastSeq) break
      }
      expect(all.map(({ seq }) => seq)).toEqual(Array.from({ length: 80 }, (_, n) => n + 1))
    }
  )

  it('tells of a deleted comment after its answers, or refuses the answer: never an answer to nothing', async () => {
    const groupId = await buildGroup(app)
    const takeId = await buildTake(app, { groupId, by: 'ines' })
    const [ines, tomas] = [await app.as('ines'), await app.as('tomas')]
    for (let round = 0; round < 10; round += 1) {
      const commentId = await buildComment(app, { takeId, by: 'ines' })
      const [reply, removal] = await Promise.all([
        tomas.send('post', `/api/comments/${commentId}/replies`).send({ id: newId(), text: 'Yes.' }),
        ines.send('delete', `/api/comments/${commentId}`)
      ])
      expect(removal.status).toBe(200)
      expect([201, 404]).toContain(reply.status)
      const events = await app.db('events').where({ object_id: commentId }).orderBy('seq').select('type')
      expect(events.map(({ type }) => type)).toEqual(
        reply.status === 201 ? ['comment:updated', 'comment:removed'] : ['comment:removed']
      )
    }
    expect(app.logs.errors()).toEqual([])
  })
})
