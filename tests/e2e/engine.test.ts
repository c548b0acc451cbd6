// Both engines in real Chromium, with no autoplay flag: what tests by hand and offline cannot show.
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
import { ingestRecording } from '@server/media/ingest'
import type { PieceManifest } from '@shared/audio/piece-manifest'

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
    element: HTMLAudioElement
    missing: (string | null)[]
    record(ms: number): Promise<Recorded>
    /** The moments (of the context) at which something rises out of silence, and the place that the player tells for them. */
    onsets(ms: number): Promise<{ at: number; place: number }[]>
  }
}

/** Everything that reaches the loudspeaker is also written down. */
const pageScript = `
import { createMediaElementPlayer } from ${JSON.stringify(join(root, 'client/transport/media-element-engine.ts'))}
import { createPlayer } from ${JSON.stringify(join(root, 'client/transport/create-player.ts'))}
const isOwn = location.search === '?own'
let last = null
let writer = null
const connect = AudioNode.prototype.connect
AudioNode.prototype.connect = function (to, ...rest) {
  if (to === this.context.destination) last = this
  return connect.call(this, to, ...rest)
}
const collect = async (ms) => {
  if (!writer) {
    await last.context.audioWorklet.addModule('/writer.js')
    writer = new AudioWorkletNode(last.context, 'writer')
    connect.call(last, writer)
  }
  const blocks = []
  writer.port.onmessage = ({ data }) => blocks.push(data)
  await new Promise((resolve) => setTimeout(resolve, ms))
  writer.port.onmessage = null
  return blocks
}
window.record = async (ms) => {
  const blocks = await collect(ms)
  return { samples: blocks.flatMap(({ samples }) => Array.from(samples)), rate: last.context.sampleRate }
}
window.onsets = async (ms) => {
  const blocks = await collect(ms)
  const rate = last.context.sampleRate
  const found = []
  let quiet = 0
  for (const { frame, samples } of blocks)
    samples.forEach((value, n) => {
      if (Math.abs(value) < 0.02) return void (quiet += 1)
      const at = (frame + n) / rate
      if (quiet > 1000) found.push({ at, place: player.positionAt(at) })
      quiet = 0
    })
  return found
}
window.missing = []
window.element = new Audio()
window.player = isOwn
  ? createPlayer({ onMissing: (words) => missing.push(words) })
  : createMediaElementPlayer({ makeElement: () => window.element })
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
    if (input[0]) this.port.postMessage({ frame: currentFrame, samples: input[0].slice() })
    return true
  }
})
`

/** The page and the worklet beside it, as a build of the application makes them, by address. */
const bundle = async (): Promise<Map<string, string>> => {
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
    worker: { format: 'es' },
    build: { write: false, minify: false, target: 'es2022', assetsInlineLimit: 0, rollupOptions: { input: id } }
  })
  const output = Array.isArray(result) ? result[0] : result
  if (!output || !('output' in output)) throw new Error('the page was not built')
  const files = new Map<string, string>()
  for (const file of output.output) {
    if (file.type === 'chunk') files.set(file.isEntry ? '/page.js' : `/${file.fileName}`, file.code)
    else
      files.set(
        `/${file.fileName}`,
        typeof file.source === 'string' ? file.source : Buffer.from(file.source).toString()
      )
  }
  return files
}

let folder: string
let server: Server
let browser: Browser
let page: Page
let address: string
/** While true the server sends the first seconds of a recording and then goes away behind its proxy. */
let isBreaking = false
const sentBeforeBreak = 400_000
const manifests = new Map<string, PieceManifest>()
let fetched: string[] = []

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

/** As the application's own (server/http/guards.ts): what it refuses must not work here either. */
const policy = "default-src 'none'; script-src 'self'; connect-src 'self'; media-src 'self' blob:; worker-src 'self'"

const sendPiece = (name: string, path: string, response: ServerResponse): void => {
  if (isBreaking) return void response.destroy()
  const manifest = manifests.get(name)
  if (!manifest) return void response.writeHead(404).end()
  if (path === 'manifest') {
    const pieces = manifest.pieces.map((piece) => ({ ...piece, url: `/pieces/${name}/${piece.file}` }))
    return void response.setHeader('content-type', 'application/json').end(JSON.stringify({ ...manifest, pieces }))
  }
  fetched.push(path)
  response.setHeader('cache-control', 'no-store').end(readFileSync(join(folder, name, 'pieces', path)))
}

const serve = (files: Map<string, string>) =>
  createServer((request, response) => {
    response.setHeader('content-security-policy', policy)
    const code = files.get(request.url ?? '')
    if (code !== undefined) return void response.setHeader('content-type', 'text/javascript').end(code)
    const piece = /^\/pieces\/(\w+)\/(.+)$/.exec(request.url ?? '')
    if (piece) return sendPiece(piece[1] ?? '', piece[2] ?? '', response)
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
  const knocks = 'aevalsrc=0.6*exp(-400*mod(t\\,0.25))*sin(2*PI*1500*mod(t\\,0.25)):s=48000:d=60'
  execFileSync('ffmpeg', ['-v', 'error', '-f', 'lavfi', '-i', knocks, join(folder, 'knocks.wav')])
  for (const name of ['tone', 'knocks']) {
    const result = await ingestRecording({ source: join(folder, `${name}.wav`), outDir: join(folder, name) })
    if (!result.ok) throw new Error(result.error.sentence)
    manifests.set(name, result.value.manifest)
  }
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
  beforeEach(async () => {
    await page.goto(address)
    await page.evaluate(() => window.player.load({ url: '/tone.m4a', durationSec: 60 }))
  })

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
          most = Math.max(most, window.element.currentTime)
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
    expect(await page.evaluate(() => window.element.playbackRate)).toBe(1.5)
  })
})

describe('the engine of our own', () => {
  const take = (name: string) => ({ url: `/${name}.m4a`, piecesUrl: `/pieces/${name}/manifest`, durationSec: 60 })
  const openTake = (name: string) => page.evaluate((source) => window.player.load(source), take(name))
  const onsets = (ms: number) => page.evaluate((time) => window.onsets(time), ms)
  const press = async () => {
    await page.click('button')
    await page.waitForFunction(() => window.player.state === 'playing')
  }

  beforeEach(async () => {
    await page.goto(`${address}/?own`)
    await page.waitForFunction(() => 'player' in window)
    fetched = []
  })

  it('waits for a tap when the browser wants one', async () => {
    const fresh = await browser.newPage()
    await fresh.goto(`${address}/?own#at-once`)
    await fresh.waitForFunction(() => window.firstAnswer !== undefined)
    expect(await fresh.evaluate(() => window.firstAnswer)).toBe(false)
    expect(await fresh.evaluate(() => window.events)).toContain('blocked')
    await fresh.close()
  })

  it('turns a short loop two hundred times without being late or drifting, and tells the place that is heard', async () => {
    await openTake('knocks')
    expect(await page.evaluate(() => window.missing)).toEqual([null])
    expect(await page.evaluate(() => window.player.capabilities.schedule)).toBe(true)
    await page.evaluate(() => window.player.setLoop({ span: { startSec: 20.2, endSec: 20.3 } }))
    await press()
    const found = await onsets(20_300)
    expect(found.length).toBeGreaterThanOrEqual(200)
    const first = found[0]?.at ?? 0
    found.forEach(({ at, place }, n) => {
      expect(Math.abs(at - first - n * 0.1)).toBeLessThan(0.001)
      expect(Math.abs(place - 20.25)).toBeLessThan(0.001)
    })
    expect(await page.evaluate(() => window.turns.length)).toBeGreaterThanOrEqual(199)
  })

  it('keeps the time of a loop at another speed', async () => {
    const rate = 0.7
    await openTake('knocks')
    await page.evaluate((value) => {
      window.player.setRate(value)
      window.player.setLoop({ span: { startSec: 20.1, endSec: 20.4 } })
    }, rate)
    await press()
    const found = await onsets(4500)
    const first = found[0]?.at ?? 0
    expect(found.length).toBeGreaterThan(8)
    found.forEach(({ at, place }, n) => {
      expect(Math.abs(at - first - (n * 0.3) / rate)).toBeLessThan(0.001)
      expect(Math.abs(place - 20.25)).toBeLessThan(0.005)
    })
  })

  it('acts at the moment asked for: starts, jumps and changes speed by appointment', async () => {
    await openTake('knocks')
    await press()
    await page.evaluate(() => window.player.pause())
    const [found, appointments] = await Promise.all([
      onsets(3000),
      page.evaluate(() => {
        const { player } = window
        const start = player.clock() + 0.5
        player.seek(30, start)
        void player.play(start)
        player.seek(40.25, start + 1.1)
        return [start, start + 1.1]
      })
    ])
    const [start = 0, jump = 0] = appointments
    const expected = [0, 0.25, 0.5, 0.75, 1].map((sec) => start + sec)
    expected.push(...[0, 0.25, 0.5].map((sec) => jump + sec))
    expected.forEach((at, n) => expect(Math.abs((found[n]?.at ?? 0) - at)).toBeLessThan(0.002))
    expect(await page.evaluate(() => window.player.heardPosition)).toBeGreaterThan(41)
  })

  it('makes no click at turns, seeks and pauses', async () => {
    await openTake('tone')
    await page.evaluate(() => window.player.setLoop({ span: { startSec: 10, endSec: 10.33 } }))
    await press()
    const recording = record(3000)
    for (const sec of [10.1, 10.17]) {
      await page.waitForTimeout(500)
      await page.evaluate((place) => window.player.seek(place), sec)
    }
    await page.evaluate(() => window.player.pause())
    await page.waitForTimeout(300)
    await page.click('button')
    const { samples, rate } = await recording
    const loudest = samples.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
    const steepest = samples.reduce(
      (most, value, n) => Math.max(most, n ? Math.abs(value - (samples[n - 1] ?? 0)) : 0),
      0
    )
    expect(loudest).toBeGreaterThan(0.02)
    expect(steepest).toBeLessThan(((2 * Math.PI * toneHz) / rate) * loudest * 2.5)
  })

  it('shifts the pitch and keeps the speed', async () => {
    await openTake('tone')
    await page.evaluate(() => {
      window.player.setPitch(12)
      window.player.setRate(0.5)
    })
    await press()
    await page.waitForFunction(() => window.player.heardPosition > 0.2)
    expect(await measuredRate()).toBeCloseTo(0.5, 1)
    expect(Math.abs(12 * Math.log2(pitchOf(await record(900)) / toneHz) - 12)).toBeLessThan(0.02)
  })

  it('plays what is there without a line, waits where nothing is, and goes on by itself when the line is back', async () => {
    await openTake('tone')
    await page.waitForFunction(
      () => performance.getEntriesByName(`${location.origin}/pieces/tone/00002.ogg`).length > 0
    )
    isBreaking = true
    await press()
    await page.waitForFunction(() => window.player.heardPosition > 1)
    await page.evaluate(() => window.player.seek(52))
    await page.waitForFunction(() => window.player.state === 'loading' && window.events.includes('fault'))
    expect(await page.evaluate(() => window.player.heardPosition)).toBeCloseTo(52, 3)
    isBreaking = false
    fetched = []
    await page.waitForFunction(() => window.player.state === 'playing' && window.player.heardPosition > 52.5)
    // The piece under the playhead comes before all others.
    expect(fetched[0]).toBe('00005.ogg')
  })

  it('falls back to the element where there are no pieces, and says what is missing', async () => {
    await page.evaluate(() =>
      window.player.load({ url: '/tone.m4a', piecesUrl: '/pieces/nothing/manifest', durationSec: 60 })
    )
    await page.waitForFunction(() => !window.player.capabilities.schedule && window.player.state === 'ready')
    expect((await page.evaluate(() => window.missing)).at(-1)).toMatch(/late.*no pitch/)
    await press()
    await page.waitForFunction(() => window.player.heardPosition > 0.3)
  })
})
