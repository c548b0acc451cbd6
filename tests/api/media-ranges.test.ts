// Ranges and conditions of RFC 9110 (13, 14), rights on every range, downloads that stay downloads (trust.md 18, 37, 39).
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { takeRoutes } from '@shared/contracts/takes'
import { contentDisposition } from '@server/http/send-file'
import { type Person, startApp, type TestApp } from '../support/app.ts'
import { buildTake } from '../support/build.ts'
import { must } from '../support/call.ts'
import { taggedPlace } from '../support/take-media.ts'

let app: TestApp
let ines: Person
let takeId: string
let whole: Buffer
beforeAll(async () => {
  app = await startApp()
  ines = await app.as('ines')
  takeId = await buildTake(app, { withMedia: true, title: '=1+1 "Ω" – take\r\nX: y; ../../etc' })
  whole = readFileSync(join(app.storageDir, 'takes', takeId, 'media', 'rendition.m4a'))
})
afterAll(() => app?.close())

const get = (headers: Record<string, string> = {}, part = 'audio', person = ines) =>
  person
    .send('get', `/api/takes/${takeId}/${part}`)
    .set(headers)
    .buffer(true)
    .parse((res, done) => {
      const chunks: Buffer[] = []
      res.on('data', (chunk: Buffer) => chunks.push(chunk))
      res.on('end', () => done(null, Buffer.concat(chunks)))
    })
const bytes = (response: { body: unknown }): Buffer => response.body as Buffer

describe('GET /api/takes/:takeId/audio', () => {
  it('gives the whole with its length, type and a strong-enough validator', async () => {
    const response = await get()
    expect(response.status).toBe(200)
    expect(response.headers).toMatchObject({
      'accept-ranges': 'bytes',
      'content-length': String(whole.length),
      'content-type': 'audio/mp4'
    })
    expect(response.get('ETag')).toBeTruthy()
    expect(response.get('Last-Modified')).toBeTruthy()
    expect(bytes(response).equals(whole)).toBe(true)
  })
  it('gives a single range (RFC 9110, 14.1.2)', async () => {
    const response = await get({ Range: 'bytes=100-199' })
    expect([response.status, response.get('Content-Range')]).toEqual([206, `bytes 100-199/${whole.length}`])
    expect(bytes(response).equals(whole.subarray(100, 200))).toBe(true)
  })
  it('gives an open range and one that reaches past the end', async () => {
    for (const range of [`bytes=${whole.length - 10}-`, `bytes=${whole.length - 10}-${whole.length + 500}`]) {
      const response = await get({ Range: range })
      expect([response.status, response.get('Content-Range')]).toEqual([
        206,
        `bytes ${whole.length - 10}-${whole.length - 1}/${whole.length}`
      ])
      expect(bytes(response).equals(whole.subarray(-10))).toBe(true)
    }
  })
  it('gives a suffix', async () => {
    const response = await get({ Range: 'bytes=-7' })
    expect(response.status).toBe(206)
    expect(bytes(response).equals(whole.subarray(-7))).toBe(true)
  })
  it('refuses what cannot be satisfied, saying how long it is (RFC 9110, 15.5.17)', async () => {
    const response = await get({ Range: `bytes=${whole.length}-` })
    expect([response.status, response.get('Content-Range')]).toEqual([416, `bytes */${whole.length}`])
    expect(JSON.parse(bytes(response).toString())).toMatchObject({ type: '/problems/range-unsatisfiable', status: 416 })
  })
  it('ignores a range that is none (RFC 9110, 14.2)', async () => {
    for (const range of ['bars=1-2', 'bytes=a-b', 'nonsense']) {
      const response = await get({ Range: range })
      expect([range, response.status]).toEqual([range, 200])
    }
  })
  it('answers 304 to who has it already, and not to a range of something else', async () => {
    const tag = (await get()).get('ETag') ?? ''
    const same = await get({ 'If-None-Match': tag })
    expect([same.status, bytes(same).length]).toEqual([304, 0])
    expect((await get({ 'If-None-Match': '"another"' })).status).toBe(200)
    const since = (await get()).get('Last-Modified') ?? ''
    expect((await get({ 'If-Modified-Since': since })).status).toBe(304)
  })
  it('sends the whole when If-Range does not fit any more (RFC 9110, 13.1.5)', async () => {
    const modified = (await get()).get('Last-Modified') ?? ''
    expect((await get({ Range: 'bytes=0-9', 'If-Range': modified })).status).toBe(206)
    expect((await get({ Range: 'bytes=0-9', 'If-Range': '"another"' })).status).toBe(200)
    expect((await get({ Range: 'bytes=0-9', 'If-Range': new Date(0).toUTCString() })).status).toBe(200)
  })
  it('answers 412 when a precondition does not hold', async () => {
    const response = await get({ 'If-Match': '"another"' })
    expect(response.status).toBe(412)
    expect(JSON.parse(bytes(response).toString())).toMatchObject({ type: '/problems/precondition-failed' })
  })
  it('answers HEAD with the same headers and no bytes', async () => {
    const head = await ines.send('head', `/api/takes/${takeId}/audio`)
    expect([head.status, head.get('Content-Length')]).toEqual([200, String(whole.length)])
  })
  it('asks every time, and gives no range to anybody who may not hear it (18, V8.2.2)', async () => {
    expect((await get()).get('Cache-Control')).toBe('private, max-age=0, must-revalidate')
    const tag = (await get()).get('ETag') ?? ''
    for (const key of ['stranger', 'sten', 'anonymous'] as const)
      for (const part of ['audio', 'original', 'peaks', 'pieces', 'pieces/0'])
        for (const headers of [
          {},
          { Range: 'bytes=0-1' },
          { Range: 'bytes=999999999-' },
          { 'If-None-Match': tag }
        ] as Record<string, string>[]) {
          const { status } = await get(headers, part, await app.as(key))
          expect([key, part, status]).toEqual([key, part, key === 'anonymous' ? 401 : 404])
        }
  })
  it('stops at once when the reach changes', async () => {
    const tomas = await app.as('tomas')
    expect((await get({ Range: 'bytes=0-1' }, 'audio', tomas)).status).toBe(206)
    await must(ines, takeRoutes.update, { params: { takeId }, body: { reach: 'only me' } })
    expect((await get({ Range: 'bytes=0-1' }, 'audio', tomas)).status).toBe(404)
    await must(ines, takeRoutes.update, { params: { takeId }, body: { reach: 'group' } })
  })
})

describe('what was uploaded', () => {
  it('comes as a download under a harmless name and never as a page (37, V5.4.1, V5.4.2, V3.2.1)', async () => {
    const response = await get({}, 'original')
    const disposition = response.get('Content-Disposition') ?? ''
    expect(disposition).toMatch(/^attachment; filename="[\w .,()-]+"; filename\*=UTF-8''[\w%.~!$&+^`|-]+$/)
    for (const part of ['audio', 'original', 'peaks', 'pieces/0']) {
      const { headers } = await get({}, part)
      expect(headers['content-security-policy']).toBe("sandbox; default-src 'none'")
      expect(headers['x-content-type-options']).toBe('nosniff')
      expect(headers['content-type']).toMatch(/^(audio\/|application\/octet-stream)/)
    }
  })
  it('has its name escaped as RFC 6266 and RFC 8187 want it', () => {
    expect(contentDisposition('Ω "take"; 1*.wav')).toBe(
      `attachment; filename="_ _take__ 1_.wav"; filename*=UTF-8''%CE%A9%20%22take%22%3B%201%2A.wav`
    )
    expect(contentDisposition('\r\n\u202e/\\')).toBe(`attachment; filename="recording"; filename*=UTF-8''recording`)
    expect(() => contentDisposition(`${'a'.repeat(149)}😀`)).not.toThrow()
  })
  it('keeps where and by whom it was made out of what the desk plays (39, V14.2.8)', async () => {
    for (const part of ['audio', 'pieces/0', 'peaks']) {
      const text = bytes(await get({}, part)).toString('latin1')
      expect(text).not.toContain(taggedPlace)
      expect(text).not.toContain('Somebody Private')
    }
  })
})

it('answered nothing with an error of ours', () => {
  expect(app.logs.errors()).toEqual([])
})
