// The desk with a long take in real Chromium: until it can be used, and how it moves.
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'
import { type Frames, helper, type Usable, watchPage } from './desk-page.ts'
import { alone, compared, type Figure } from './report.ts'
import type { Stage } from './stage.ts'
import { inPairs, middle, percentile } from './statistics.ts'

const args = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-extensions',
  '--no-first-run'
]
const movingMs = 5000

const openContext = async (browser: Browser, url: string, cookie: string): Promise<BrowserContext> => {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  const [name = '', value = ''] = cookie.split('=', 2)
  await context.addCookies([{ name, value: cookie.slice(name.length + 1) || value, url }])
  await context.addInitScript({ content: helper })
  await context.addInitScript(watchPage)
  return context
}

const usable = async (page: Page, url: string): Promise<Usable> => {
  await page.goto(url, { waitUntil: 'commit' })
  return page.evaluate(() => window.benchUsable)
}

const emptyMs = async (page: Page, url: string): Promise<number> => {
  await page.goto(url, { waitUntil: 'commit' })
  return page.evaluate(() => new Promise<number>((done) => requestAnimationFrame(() => done(performance.now()))))
}

/** Zooms in, pans and zooms out over and over at the same place of the window, whatever page is there. */
const moveAbout = async (page: Page, at: { x: number; y: number }): Promise<Frames> => {
  const frames = page.evaluate((ms) => window.benchFrames(ms), movingMs)
  const over = new AbortController()
  void frames.finally(() => over.abort())
  await page.mouse.move(at.x, at.y)
  const wheel = async (steps: number, deltaX: number, deltaY: number) => {
    for (let step = 0; step < steps && !over.signal.aborted; step += 1) await page.mouse.wheel(deltaX, deltaY)
  }
  while (!over.signal.aborted) {
    await page.keyboard.down('Control')
    await wheel(12, 0, -140)
    await page.keyboard.up('Control')
    await wheel(30, 160, 0)
    await page.keyboard.down('Control')
    await wheel(12, 0, 140)
    await page.keyboard.up('Control')
  }
  return frames
}

const sumOf = (bytes: Usable['bytes'], endings: readonly string[], key: 'wire' | 'raw'): number =>
  endings.reduce((sum, ending) => sum + (bytes[ending]?.[key] ?? 0), 0) / 1000

const loadFigures = async (browser: Browser, stage: Stage, rounds: number): Promise<Figure[]> => {
  const real = await stage.real()
  const bare = await stage.bare()
  const { takeId, what } = await stage.longTake()
  const url = `${real.url}/takes/${takeId}`
  const [first, second]: [Usable[], Usable[]] = [[], []]
  const empties: number[] = []
  for (let round = 0; round < rounds; round += 1) {
    const context = await openContext(browser, real.url, real.cookie)
    const page = await context.newPage()
    empties.push(await emptyMs(page, `${bare.url}/empty`))
    first.push(await usable(page, url))
    empties.push(await emptyMs(page, `${bare.url}/empty`))
    second.push(await usable(page, url))
    await context.close()
  }
  const cold = first[0] as Usable
  const how = `${what}, from the navigation until Play can be pressed and the sound is drawn; peer: an empty page`
  const peers = (offset: 0 | 1) => empties.filter((_, i) => i % 2 === offset)
  const of = (loads: readonly Usable[], key: 'usableMs' | 'playMs' | 'drawnMs' | 'largestPaintMs' | 'firstPaintMs') =>
    loads.map((one) => one[key])
  const code = ['js', 'css', 'woff2']
  return [
    compared(
      'usable, first time',
      'ms',
      { ours: of(first, 'usableMs'), peer: peers(0) },
      `${how}; nothing kept by the browser`
    ),
    compared(
      'usable, second time',
      'ms',
      { ours: of(second, 'usableMs'), peer: peers(1) },
      `${how}; files kept by the browser`
    ),
    alone('Play can be pressed, first time', 'ms', middle(of(first, 'playMs')), how),
    alone('sound is drawn, first time', 'ms', middle(of(first, 'drawnMs')), how),
    alone('first paint, first time', 'ms', middle(of(first, 'firstPaintMs')), 'first contentful paint'),
    alone(
      'largest paint, first time',
      'ms',
      middle(of(first, 'largestPaintMs')),
      'largest contentful paint until usable'
    ),
    alone('nodes when usable', '', cold.nodes, 'elements in the document'),
    alone('requests until usable', '', cold.requests, 'resource timing', cold.bytes),
    ...code.map((ending) =>
      alone(
        `${ending} until usable, as sent`,
        'kB',
        sumOf(cold.bytes, [ending], 'wire'),
        `${cold.bytes[ending]?.files ?? 0} files, ${Math.round(sumOf(cold.bytes, [ending], 'raw'))} kB unpacked`
      )
    ),
    alone(
      'answers of the api until usable',
      'kB',
      sumOf(cold.bytes, ['api'], 'wire'),
      `${cold.bytes['api']?.files ?? 0} requests, ${Math.round(sumOf(cold.bytes, ['api'], 'raw'))} kB unpacked; the sound itself among them as far as it had come`
    )
  ]
}

const frameFigures = async (browser: Browser, stage: Stage, rounds: number): Promise<Figure[]> => {
  const real = await stage.real()
  const bare = await stage.bare()
  const { takeId, what } = await stage.longTake()
  const context = await openContext(browser, real.url, real.cookie)
  const desk = await context.newPage()
  const faults: string[] = []
  desk.on('pageerror', (error) => faults.push(error.message))
  await usable(desk, `${real.url}/takes/${takeId}`)
  await desk.getByTestId('sound').scrollIntoViewIfNeeded()
  const lanes = await desk.getByTestId('sound').boundingBox()
  if (!lanes) throw new Error('There is no lane of sound on the desk')
  const at = { x: lanes.x + lanes.width / 2, y: lanes.y + lanes.height / 2 }
  const empty = await context.newPage()
  await empty.goto(`${bare.url}/empty`)
  const seen: { ours: Frames[]; peer: Frames[] } = { ours: [], peer: [] }
  const measure = (page: Page, side: 'ours' | 'peer') => async (): Promise<number> => {
    await page.bringToFront()
    const frames = await moveAbout(page, at)
    seen[side].push(frames)
    return Math.max(...frames.gaps)
  }
  const longest = await inPairs(rounds, measure(desk, 'ours'), measure(empty, 'peer'))
  const slow = (frames: readonly Frames[]) => frames.map(({ gaps }) => percentile(gaps, 0.95))
  const usual = (frames: readonly Frames[]) => frames.map(({ gaps }) => middle(gaps))
  await context.close()
  if (seen.ours.some(({ taken }) => taken < 20)) throw new Error('The timeline did not take the wheel')
  if (faults.length > 0) throw new Error(`The desk has faults: ${faults.join('; ')}`)
  const how = `${what}, ${movingMs / 1000} s of zooming and panning by wheel; peer: an empty page under the same wheel`
  const detail = seen.ours
    .flatMap(({ long }) => long)
    .sort((a, b) => b.ms - a.ms)
    .slice(0, 6)
  return [
    compared('longest frame', 'ms', longest, how, detail),
    compared('frame, p95', 'ms', { ours: slow(seen.ours), peer: slow(seen.peer) }, how),
    compared('frame, median', 'ms', { ours: usual(seen.ours), peer: usual(seen.peer) }, how)
  ]
}

export const deskFigures = async (stage: Stage, rounds: number): Promise<Figure[]> => {
  const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args })
  try {
    return [...(await loadFigures(browser, stage, rounds)), ...(await frameFigures(browser, stage, rounds))]
  } finally {
    await browser.close()
  }
}
