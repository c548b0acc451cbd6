// People who come into a house with a browser, and what their browsers complained about.
import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { type Browser, type BrowserContext, type BrowserContextOptions, chromium, type Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, expect } from 'vitest'
import type { PersonKey } from '../../support/people.ts'
import { type House, openHouse } from './house.ts'

export interface VisitOptions extends BrowserContextOptions {
  /** Runs in every page before its own scripts. */
  before?: string
}

export interface Visits {
  house: House
  browser: Browser
  /** A browser of somebody's own, signed in as a person of the demo group or as nobody. */
  visit(who: PersonKey | null, options?: VisitOptions): Promise<Page>
  /** Complaints of this kind are what the running test is about. */
  expectTrouble(pattern: RegExp): void
}

// No autoplay flag: sound starts only after a person has done something, as everywhere.
export const launch = (args: string[] = []): Promise<Browser> =>
  chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', ...args] })

/** Chromium writes every answer of 400 and more on the console; what the page makes of it is looked at by the tests. */
const answered = /^Failed to load resource: the server responded with a status of 4\d\d/

const watch = async (context: BrowserContext, note: (trouble: string) => void): Promise<void> => {
  await context.exposeBinding('tellOfViolation', (_, words: string) => note(`content security policy: ${words}`))
  await context.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', ({ effectiveDirective, blockedURI, sourceFile }) => {
      const tell = (window as unknown as { tellOfViolation(words: string): void }).tellOfViolation
      tell(`${effectiveDirective} ${blockedURI} ${sourceFile}`)
    })
  })
  context.on('page', (page) => {
    page.on('pageerror', (error) => note(`page error: ${error.stack ?? error.message}`))
    page.on('dialog', (dialog) => {
      note(`dialog: ${dialog.type()} ${dialog.message()}`)
      void dialog.dismiss().catch(() => undefined)
    })
    page.on('console', (message) => {
      if (message.type() === 'error' && !answered.test(message.text())) note(`console: ${message.text()}`)
    })
  })
}

/** Registers the hooks of a test file: a house, a browser, and after every test nobody has complained. */
export const useVisits = (browserArgs: string[] = []): Visits => {
  let house: House | null = null
  let browser: Browser | null = null
  let contexts: BrowserContext[] = []
  let troubles: string[] = []
  let expected: RegExp[] = []
  const cookies = new Map<PersonKey, Promise<{ name: string; value: string }>>()

  beforeAll(async () => {
    house = await openHouse()
    browser = await launch(browserArgs)
  })
  afterAll(async () => {
    await browser?.close()
    await house?.stop()
  })
  afterEach(async (context) => {
    const shots = process.env['PLUMBLINE_SHOTS']
    if (shots && context.task.result?.state === 'fail') {
      mkdirSync(shots, { recursive: true })
      const pages = contexts.flatMap((one) => one.pages())
      const name = context.task.name.replaceAll(/\W+/g, '-')
      for (const [index, page] of pages.entries())
        await page.screenshot({ path: join(shots, `${name}-${index}.png`) }).catch(() => undefined)
    }
    await Promise.all(contexts.map((one) => one.close()))
    const left = troubles.filter((trouble) => !expected.some((pattern) => pattern.test(trouble)))
    if (shots) {
      // Told at once: the run's own account comes only at its end.
      const words = [
        ...(context.task.result?.errors ?? []).map(({ message, stack }) => `${message}\n${stack}`),
        ...left
      ]
      process.stderr.write(words.map((each) => `! ${context.task.name}: ${each}\n`).join(''))
    }
    contexts = []
    troubles = []
    expected = []
    expect(left).toEqual([])
  })

  return {
    get house() {
      if (!house) throw new Error('the house is not open yet')
      return house
    },
    get browser() {
      if (!browser) throw new Error('the browser is not open yet')
      return browser
    },
    expectTrouble: (pattern) => void expected.push(pattern),
    visit: async (who, { before, ...options } = {}) => {
      if (!house || !browser) throw new Error('the house is not open yet')
      const here = house
      const context = await browser.newContext({
        baseURL: here.url,
        viewport: { width: 1280, height: 800 },
        reducedMotion: 'reduce',
        ...options
      })
      context.setDefaultTimeout(20_000)
      contexts.push(context)
      await watch(context, (trouble) => void troubles.push(trouble))
      if (before) await context.addInitScript(before)
      if (who) {
        const cookie = cookies.get(who) ?? here.cookieOf(who)
        cookies.set(who, cookie)
        await context.addCookies([{ ...(await cookie), url: here.url }])
      }
      return context.newPage()
    }
  }
}
