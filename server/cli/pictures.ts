// Makes the pictures of README.md from the demo group, in a room of its own: npm run pictures.
import { spawn } from 'node:child_process'
import { createServer } from 'node:net'
import { once } from 'node:events'
import { fileURLToPath } from 'node:url'
import { join } from 'node:path'
import { chromium, type Browser, type Page } from 'playwright-core'
import { openTestRoom } from '../setup/test-room.mjs'
import { demoPassword, personaEmail } from '../../seeds/01_personas'
import { demoId } from '../../seeds/02_demo_group'

const root = fileURLToPath(new URL('../../', import.meta.url))
const target = fileURLToPath(new URL('../../seeds/pictures/', import.meta.url))
const desk = `/takes/${demoId('slack-tide-ines-second-try')}?pass=2&bars=17-20&speed=60&loop=1`
const size = { width: 1440, height: 900 }
const phone = { width: 360, height: 740 }

const freePort = async (): Promise<number> => {
  const probe = createServer().listen(0, '127.0.0.1')
  await once(probe, 'listening')
  const address = probe.address()
  probe.close()
  return typeof address === 'object' && address ? address.port : 0
}

const runTs = (script: string, env: NodeJS.ProcessEnv) =>
  spawn(process.execPath, ['--import', 'tsx', script], {
    cwd: root,
    env,
    stdio: ['ignore', 'ignore', 'inherit', 'ipc']
  })
const finish = async (script: string, env: NodeJS.ProcessEnv): Promise<void> => {
  const [code] = (await once(runTs(script, env), 'exit')) as [number | null]
  if (code !== 0) throw new Error(`${script} ended with ${code}`)
}

const signedIn = async (
  browser: Browser,
  base: string,
  who: string,
  look: { colorScheme: 'light' | 'dark'; viewport: typeof size }
): Promise<Page> => {
  const page = await (await browser.newContext({ ...look, baseURL: base, reducedMotion: 'reduce' })).newPage()
  const answer = await page.request.post('/api/sign-in', {
    data: { email: personaEmail(who), password: demoPassword },
    headers: { Origin: base }
  })
  if (!answer.ok()) throw new Error(`${who} could not sign in: ${answer.status()}`)
  return page
}

/** Waits until nothing more is fetched and the faces have come, so that the picture is of the finished screen. */
const shoot = async (page: Page, path: string, name: string): Promise<void> => {
  await page.goto(path)
  await page.waitForLoadState('networkidle')
  await page.evaluate('document.fonts.ready.then(() => true)')
  await page.waitForTimeout(600)
  await page.screenshot({ path: join(target, `${name}.png`) })
  process.stdout.write(`seeds/pictures/${name}.png\n`)
}

const takeAll = async (browser: Browser, base: string): Promise<void> => {
  const stranger = await (await browser.newContext({ viewport: size, baseURL: base })).newPage()
  await shoot(stranger, '/', 'first-screen')
  const light = await signedIn(browser, base, 'ines', { colorScheme: 'light', viewport: size })
  await shoot(light, desk, 'desk-daylight')
  await shoot(light, `/tunes/${demoId('ferry-money')}`, 'chart')
  await shoot(light, '/', 'home')
  const dark = await signedIn(browser, base, 'mara', { colorScheme: 'dark', viewport: size })
  await shoot(dark, desk, 'desk-late-set')
  const small = await signedIn(browser, base, 'tomas', { colorScheme: 'light', viewport: phone })
  await shoot(small, desk, 'desk-phone')
}

const room = await openTestRoom({ database: true, build: true })
const port = await freePort()
const base = `http://127.0.0.1:${port}`
const env = {
  ...process.env,
  ...room.env,
  DATABASE_URL: room.env.TEST_DATABASE_URL,
  PORT: String(port),
  HOST: '127.0.0.1'
}
try {
  await finish('server/cli/migrate.ts', env)
  await finish('server/cli/seed.ts', env)
  const server = runTs('server/main.ts', env)
  await once(server, 'message')
  const browser = await chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu']
  })
  try {
    await takeAll(browser, base)
  } finally {
    await browser.close()
    server.kill('SIGTERM')
    await once(server, 'exit')
  }
} finally {
  await room.close()
}
