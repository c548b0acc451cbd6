// The media element engine in real Chromium, with no autoplay flag: what the tests with a hand-driven element cannot show.
import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { chromium, type Browser, type Page } from 'playwright-core'
import { build } from 'vite'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Player } from '@client/transport/player'

const root = fileURLToPath(new URL('../..', import.meta.url))
const toneHz = 220

interface Recorded {
  samples: Float32Array
  rate: number
}
declare global {
  interface Window {
    player: Player
    turns: number[]
    events: string[]
    firstAnswer?: boolean
    record(ms: number): Promise<Recorded>
  }
}

/** Everything that reaches the loudspeaker is also written down. */
const pageScript = `
import { createMediaElementPlayer } from ${JSON.stringify(join(root, 'client/transport/media-element-engine.ts'))}
let last = null
let writer = null
const connect = AudioNode.prototype.connect
AudioNode.prototype.connect = function (to, ...rest) {
  if (to === this.context.destination) last = this
  return connect.call(this, to, ...rest)
}
window.record = async (ms) => {
  if (!writer) {
    await last.context.audioWorklet.addModule('/writer.js')
    writer = new AudioWorkletNode(last.context, 'writer')
    connect.call(last, writer)
  }
  const blocks = []
  writer.port.onmessage = ({ data }) => blocks.push(data)
  await new Promise((resolve) => setTimeout(resolve, ms))
  writer.port.onmessage = null
  return { samples: blocks.flatMap((block) => Array.from(block)), rate: last.context.sampleRate }
}
window.player = createMediaElementPlayer()
window.turns = []
window.events = []
player.on('turn', ({ count }) => turns.push(count))
for (const name of ['blocked', 'fault']) player.on(name, () => events.push(name))
player.on('state', (state) => events.push(state))
if (location.hash === '#at-once') {
  // From the page itself: what playwright evaluates counts as the person's own doing.
  await player.load({ url: '/tone.m4a', durationSec: 60 })
  window.firstAnswer = await player.play()
}
document.querySelector('button').addEventListener('click', () => void player.play())
`

const writerScript = `
registerProcessor('writer', class extends AudioWorkletProcessor {
  process([input]) {
    if (input[0]) this.port.postMessage(input[0].slice())
    return true
  }
})
`

const bundle = async (): Promise<string> => {
  const id = 'virtual:engine-page'
  const result = await build({
    configFile: false,
    root,
    logLevel: 'error',
    resolve: { alias: { '@client': join(root, 'client'), '@shared': join(root, 'shared') } },
    plugins: [
      {
        name: 'engine-page',
        resolveId: (source) => (source === id ? `\0${id}` : null),
        load: (source) => (source === `\0${id}` ? pageScript : null)
      }
    ],
    build: { write: false, minify: false, target: 'es2022', rollupOptions: { input: id } }
  })
  const output = Array.isArray(result) ? result[0] : result
  if (!output || !('output' in output)) throw new Error('the page was not built')
  return output.output.find((chunk) => chunk.type === 'chunk')?.code ?? ''
}

let folder: string
let server: Server
let browser: Browser
let page: Page
let address: string
/** While true the server sends the first seconds of a recording and then goes away behind its proxy. */
let isBreaking = false
const sentBeforeBreak = 400_000

const sendTone = (request: IncomingMessage, response: ServerResponse): void => {
  const bytes = readFileSync(join(folder, request.url ?? ''))
  const range = /bytes=(\d+)-(\d*)/.exec(request.headers.range ?? '')
  const start = Number(range?.[1] ?? 0)
  const end = Math.min(bytes.length - 1, range?.[2] ? Number(range[2]) : bytes.length - 1)
  if (isBreaking && start >= sentBeforeBreak) return void response.writeHead(502).end()
  response.writeHead(range ? 206 : 200, {
    'content-type': request.url?.endsWith('.wav') ? 'audio/wav' : 'audio/mp4',
    'accept-ranges': 'bytes',
    'cache-control': 'no-store',
    'content-length': end - start + 1,
    ...(range ? { 'content-range': `bytes ${start}-${end}/${bytes.length}` } : {})
  })
  if (!isBreaking) return void response.end(bytes.subarray(start, end + 1))
  response.write(bytes.subarray(start, sentBeforeBreak), () => response.destroy())
}

const serve = (code: string) =>
  createServer((request, response) => {
    if (request.url === '/page.js') return void response.setHeader('content-type', 'text/javascript').end(code)
    if (request.url === '/writer.js')
      return void response.setHeader('content-type', 'text/javascript').end(writerScript)
    if (request.url?.startsWith('/tone.')) return sendTone(request, response)
    response
      .setHeader('content-type', 'text/html')
      .end('<!doctype html><button>Play</button><script type="module" src="/page.js"></script>')
  })

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'engine-'))
  const tone = `aevalsrc=0.3*sin(2*PI*${toneHz}*t):s=44100:d=60`
  for (const file of ['tone.m4a', 'tone.wav'])
    execFileSync('ffmpeg', ['-v', 'error', '-f', 'lavfi', '-i', tone, '-movflags', '+faststart', join(folder, file)])
  server = serve(await bundle())
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  address = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] })
})
afterAll(async () => {
  await browser?.close()
  server?.closeAllConnections()
  server?.close()
  rmSync(folder, { recursive: true, force: true })
})
beforeEach(async () => {
  isBreaking = false
  page = await browser.newPage()
  await page.goto(address)
  await page.evaluate(() => window.player.load({ url: '/tone.m4a', durationSec: 60 }))
})
afterEach(() => page.close())

/** Rising zero crossings a second, over the part that sounds. */
const pitchOf = ({ samples, rate }: { samples: number[]; rate: number }): number => {
  const crossings = samples.flatMap((value, n) => (n > 0 && (samples[n - 1] ?? 0) < 0 && value >= 0 ? [n] : []))
  const [first = 0, last = 0] = [crossings[0], crossings.at(-1)]
  return ((crossings.length - 1) * rate) / (last - first)
}
const record = (ms: number) =>
  page.evaluate((time) => window.record(time), ms) as unknown as Promise<{ samples: number[]; rate: number }>

/** Seconds of take that go by in a second of the browser's own clock. */
const measuredRate = () =>
  page.evaluate(async () => {
    const read = () => ({ at: performance.now() / 1000, sec: window.player.heardPosition })
    const from = read()
    await new Promise((resolve) => setTimeout(resolve, 2000))
    const to = read()
    return (to.sec - from.sec) / (to.at - from.at)
  })

describe('the media element engine', () => {
  it('waits for a tap when the browser wants one, then plays', async () => {
    const fresh = await browser.newPage()
    await fresh.goto(`${address}/#at-once`)
    await fresh.waitForFunction(() => window.firstAnswer !== undefined)
    expect(await fresh.evaluate(() => window.firstAnswer)).toBe(false)
    expect(await fresh.evaluate(() => window.events)).toContain('blocked')
    await fresh.click('button')
    await fresh.waitForFunction(() => window.player.state === 'playing' && window.player.heardPosition > 0.3)
    await fresh.close()
  })

  it.each([0.2, 0.5, 1, 1.5])('plays at %f of the speed with the pitch kept', async (rate) => {
    await page.evaluate((value) => window.player.setRate(value), rate)
    await page.click('button')
    await page.waitForFunction(() => window.player.heardPosition > 0.2)
    expect(await measuredRate()).toBeCloseTo(rate, 1)
    // A tenth of a semitone: the element's own pitch keeping wanders by fractions of a cent (measured 0.2-0.3).
    expect(Math.abs(12 * Math.log2(pitchOf(await record(900)) / toneHz))).toBeLessThan(0.1)
  })

  it('seeks to the place and goes on from there', async () => {
    await page.click('button')
    await page.waitForFunction(() => window.player.state === 'playing')
    await page.evaluate(() => window.player.seek(40))
    expect(await page.evaluate(() => window.player.heardPosition)).toBe(40)
    await page.waitForFunction(() => window.player.heardPosition > 40.3 && window.player.heardPosition < 45)
  })

  it('loops, never hears far beyond the end, and makes no click when it turns', async () => {
    await page.evaluate(() => window.player.setLoop({ span: { startSec: 10, endSec: 10.7 } }))
    await page.click('button')
    await page.waitForFunction(() => window.player.state === 'playing')
    const [recorded, farthest] = await Promise.all([
      record(3500),
      page.evaluate(async () => {
        let most = 0
        for (let n = 0; n < 300; n += 1) {
          most = Math.max(most, window.player.media.currentTime)
          await new Promise((resolve) => setTimeout(resolve, 10))
        }
        return most
      })
    ])
    expect(await page.evaluate(() => window.turns.length)).toBeGreaterThanOrEqual(2)
    // Fade and timers together reach over the end by some hundredths; shelf figures for elements are 45-165 ms.
    expect(farthest).toBeLessThan(10.9)
    const { samples, rate } = recorded
    const loudest = samples.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
    const steepest = samples.reduce(
      (most, value, n) => Math.max(most, n ? Math.abs(value - (samples[n - 1] ?? 0)) : 0),
      0
    )
    expect(loudest).toBeGreaterThan(0.02)
    // A sine of this height rises by no more than 2 pi f / rate a sample; a click is many times that.
    expect(steepest).toBeLessThan(((2 * Math.PI * toneHz) / rate) * loudest * 2.5)
  })

  it('keeps below full scale however much gain a quiet recording gets', async () => {
    await page.evaluate(() => window.player.load({ url: '/tone.m4a', durationSec: 60, gainDb: 18 }))
    await page.evaluate(() => window.player.setVolume(1))
    await page.click('button')
    await page.waitForFunction(() => window.player.heardPosition > 0.5)
    const { samples } = await record(800)
    expect(samples.reduce((most, value) => Math.max(most, Math.abs(value)), 0)).toBeLessThan(1)
  })

  it('comes back after the line broke in the middle, at the same place', async () => {
    isBreaking = true
    await page.evaluate(() => window.player.load({ url: '/tone.wav', durationSec: 60 }))
    await page.evaluate(() => window.player.setRate(1.5))
    await page.evaluate(() => window.player.seek(2))
    await page.click('button')
    await page.waitForFunction(() => window.events.includes('fault'), undefined, { timeout: 90_000 })
    const brokeAt = await page.evaluate(() => window.player.heardPosition)
    expect(brokeAt).toBeGreaterThanOrEqual(2)
    isBreaking = false
    await page.waitForFunction(() => window.player.state === 'playing', undefined, { timeout: 30_000 })
    await page.waitForFunction((from) => window.player.heardPosition > from + 0.5, brokeAt)
    expect(await page.evaluate(() => window.player.heardPosition)).toBeLessThan(brokeAt + 10)
    expect(await page.evaluate(() => window.player.media.playbackRate)).toBe(1.5)
  })
})
