// Playing over a take: what the page lets out comes back as its microphone, late by a known way, and what is kept has to lie
// where it was heard. Chromium's own fake microphone cannot hear the page, so the page's sound is led back inside it.
import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, it } from 'vitest'
import type { BarMapBody } from '@shared/timing/types'
import { realFft } from '@shared/audio/stretch/fft'
import { pluckedBass, ffmpeg } from '../support/media.ts'
import { bringTake } from './support/bring.ts'
import { deskIsReady, markBars, soon } from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const folder = mkdtempSync(join(tmpdir(), 'plumbline-over-'))
const visits = useVisits(['--use-fake-device-for-media-stream', '--use-fake-ui-for-media-stream'])
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** The way from the loudspeaker to the microphone, seconds. */
const wayThere = 0.08
/**
 * The engines' sound (their contexts ask for a rate; here all have the one) also goes to the microphone, from one context to
 * another as from one device to another. The one context goes on whichever engine rests or is closed.
 */
const ledBack = `
  const Own = window.AudioContext
  const connect = AudioNode.prototype.connect
  let shared = null
  const engines = (options) => {
    if (shared) return shared
    shared = new Own(options)
    shared.close = shared.suspend = async () => undefined
    shared.way = new DelayNode(shared, { maxDelayTime: 1, delayTime: ${wayThere} })
    shared.microphone = new MediaStreamAudioDestinationNode(shared)
    connect.call(shared.way, shared.microphone)
    return shared
  }
  window.AudioContext = new Proxy(Own, {
    construct: (target, [options]) => (options?.sampleRate ? engines(options) : new Own(options))
  })
  AudioNode.prototype.connect = function (to, ...rest) {
    if (shared && to === shared.destination) connect.call(this, shared.way)
    return connect.call(this, to, ...rest)
  }
  if (navigator.mediaDevices)
    navigator.mediaDevices.getUserMedia = async () => {
      const context = engines({ sampleRate: 48000 })
      await context.resume()
      return context.microphone.stream.clone()
    }
`

const bars: BarMapBody = {
  anchors: [1, 2, 3, 4, 5, 6].map((bar) => ({
    id: `b${bar}`,
    sec: 0.31 + bar * 2,
    position: { bar, beat: { n: 1, d: 1 } }
  })),
  meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
  marks: [{ bar: 1, formBar: 1, newPass: true }]
}

const rate = 48_000
const samplesOf = (path: string): Float64Array => {
  const raw = execFileSync('ffmpeg', ['-v', 'error', '-i', path, '-ac', '1', '-ar', `${rate}`, '-f', 'f32le', '-'], {
    maxBuffer: 64e6
  })
  return Float64Array.from({ length: raw.length / 4 }, (_, n) => raw.readFloatLE(n * 4))
}
/** How much later than in the one sound the same lies in the other, seconds: the highest place of their correlation. */
const laterBy = (one: Float64Array, other: Float64Array): number => {
  const size = 2 ** Math.ceil(Math.log2(one.length + other.length))
  const fft = realFft(size)
  const spectrum = (samples: Float64Array) => {
    const padded = new Float64Array(size)
    padded.set(samples)
    const [re, im] = [new Float64Array(size / 2 + 1), new Float64Array(size / 2 + 1)]
    fft.forward(padded, re, im)
    return { re, im }
  }
  const [a, b] = [spectrum(one), spectrum(other)]
  const re = a.re.map((value, n) => value * (b.re[n] ?? 0) + (a.im[n] ?? 0) * (b.im[n] ?? 0))
  const im = a.re.map((value, n) => value * (b.im[n] ?? 0) - (a.im[n] ?? 0) * (b.re[n] ?? 0))
  const product = new Float64Array(size)
  fft.inverse(re, im, product)
  const best = product.reduce((most, value, n) => (value > (product[most] ?? 0) ? n : most), 0)
  return (best > size / 2 ? best - size : best) / rate
}

it('keeps a try where it was heard, to ten milliseconds, under the bars of the take', async () => {
  // Fourteen seconds of notes that are nowhere the same.
  const source = join(folder, 'source.wav')
  ffmpeg(...pluckedBass(14), source)
  const takeId = await bringTake(visits.house, 'tomas', source, { title: 'Low Water' })
  const page = await visits.visit('tomas', { before: ledBack })
  const { name, value } = await visits.house.cookieOf('tomas')
  const call = async (method: string, path: string, body?: object) => {
    const answer = await fetch(`${visits.house.url}${path}`, {
      method,
      headers: { origin: visits.house.url, cookie: `${name}=${value}`, 'content-type': 'application/json' },
      ...(body ? { body: JSON.stringify(body) } : {})
    })
    if (!answer.ok) throw new Error(`${answer.status} ${await answer.text()}`)
    return answer
  }
  await call('PATCH', `/api/takes/${takeId}/bar-map`, {
    id: crypto.randomUUID(),
    baseRevision: 0,
    operations: [{ kind: 'setAll', body: bars }]
  })

  await page.goto(`/takes/${takeId}`)
  await deskIsReady(page)
  await markBars(page, 2, 3)
  await page.getByRole('button', { name: 'Record over it' }).click()
  const panel = page.getByRole('region', { name: 'Record over it' })
  await panel.getByRole('checkbox', { name: 'The click' }).uncheck()
  await panel.getByRole('combobox', { name: 'Before it starts' }).selectOption({ label: 'Start at once' })
  await panel.getByRole('button', { name: 'Use the microphone' }).click()
  await panel.getByText(/by the browser’s own account/).waitFor()
  await panel.getByRole('button', { name: 'Measure this machine' }).click()
  const measured = panel.getByText(/ms late, as measured/)
  await measured.waitFor()
  const delayMs = Number(/(-?\d+) ms late/.exec((await measured.textContent()) ?? '')?.[1])
  // The way back skips the loudspeaker's own delay, which both clocks count: some ten milliseconds either way.
  expect(Math.abs(delayMs - wayThere * 1000)).toBeLessThan(60)
  await panel.getByRole('button', { name: 'I have them on' }).click()

  await panel.getByRole('button', { name: 'Record', exact: true }).click()
  const stop = panel.getByRole('button', { name: 'Stop' })
  await stop.waitFor()
  expect(await stop.evaluate((button) => button === document.activeElement)).toBe(true)
  // Bars 2 and 3 last four seconds: once round and a good part of the second time.
  await page.waitForTimeout(8500)
  await page.keyboard.press('Enter')
  const tries = panel.getByRole('region', { name: 'Your tries' }).getByRole('listitem')
  await tries.nth(1).waitFor()
  expect(await tries.count()).toBeGreaterThanOrEqual(2)

  await tries.nth(1).getByRole('button', { name: 'Listen to try 2 with the take' }).click()
  await tries.nth(1).getByRole('button', { name: 'Pause try 2' }).click()
  await tries.nth(0).getByRole('button', { name: 'Throw away try 1' }).click()
  await tries.nth(0).getByRole('button', { name: 'Keep try 2' }).click()
  const keep = page.getByRole('dialog', { name: 'Keep this try' })
  expect(await keep.getByRole('textbox', { name: 'Title' }).inputValue()).toBe('Low Water · try 2')
  await keep.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await keep.getByRole('button', { name: 'Keep it' }).click()
  await soon(async () => expect(await panel.getByText('Try 2').count()).toBe(0))

  const [kept] = await visits.house.rows<{ id: string; reach: string }>(
    'select id, reach from takes where over_take_id = $1',
    [takeId]
  )
  expect(kept?.reach).toBe('my teachers')
  const map = (await (await call('GET', `/api/takes/${kept?.id}/bar-map`)).json()) as { body: BarMapBody }
  const lineOf = (body: BarMapBody, bar: number) =>
    body.anchors.find(({ position }) => position.bar === bar && position.beat.n === position.beat.d)?.sec ?? NaN
  await soon(async () => {
    const [row] = await visits.house.rows<{ state: string }>('select state from takes where id = $1', [kept?.id])
    expect(row?.state).toBe('ready')
  })
  const recorded = join(folder, 'kept.wav')
  writeFileSync(recorded, Buffer.from(await (await call('GET', `/api/takes/${kept?.id}/original`)).arrayBuffer()))
  // Only the two bars, so that nothing of the rounds before and after is taken for them.
  const cut = (samples: Float64Array, fromSec: number) =>
    samples.slice(Math.round(fromSec * rate), Math.round((fromSec + 3.5) * rate))
  const [then, now] = [lineOf(bars, 2), lineOf(map.body, 2)]
  const offMs = laterBy(cut(samplesOf(source), then), cut(samplesOf(recorded), now)) * 1000
  process.stderr.write(`over-recording: delay ${delayMs} ms, notes ${offMs.toFixed(2)} ms beside their place\n`)
  expect(Math.abs(offMs)).toBeLessThan(10)
  expect(lineOf(map.body, 3) - now).toBeCloseTo(2, 6)
})
