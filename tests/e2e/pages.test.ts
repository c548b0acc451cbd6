// Every page, as axe and a narrow screen find it.
import { randomUUID } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, it } from 'vitest'
import type { Page } from 'playwright-core'
import { demoGroup } from '../../seeds/01_personas.ts'
import { demoId } from '../../seeds/02_demo_group.ts'
import { pluck } from './support/bring.ts'
import { comments, deskIsReady, markBars, openDesk, takePath, transport } from './support/desk.ts'
import { expectNoViolations, expectToFit } from './support/look.ts'
import { useVisits } from './support/visit.ts'

const visits = useVisits()
const folder = mkdtempSync(join(tmpdir(), 'plumbline-e2e-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const look = async (page: Page, what: string, within?: string): Promise<void> => {
  await page.waitForLoadState('networkidle')
  await expectNoViolations(page, what, within)
  await expectToFit(page, what, within)
}
const dialog = 'dialog[open]'
const menu = '[role="menu"]'
const barsPanel = 'section:has(> header [aria-label="Close the bars"])'
const tabPanel = '[role="tabpanel"]'

const hearOwn = async (page: Page, button: string): Promise<void> => {
  const [chooser] = await Promise.all([
    page.waitForEvent('filechooser'),
    page.getByRole('button', { name: button }).click()
  ])
  await chooser.setFiles(pluck(folder, 'own line.mp3', 6))
  await deskIsReady(page)
}

/** A link as Mara would send it. */
const invitation = async (): Promise<string> => {
  const cookie = await visits.house.cookieOf('mara')
  const answer = await fetch(`${visits.house.url}/api/groups/${demoGroup.id}/invitations`, {
    method: 'POST',
    headers: {
      origin: visits.house.url,
      'content-type': 'application/json',
      cookie: `${cookie.name}=${cookie.value}`
    },
    body: JSON.stringify({ id: randomUUID(), role: 'member', note: '' })
  })
  return `/join#${((await answer.json()) as { token: string }).token}`
}

describe('pages without faults that axe finds, by day and night, 360 and 320 px wide', () => {
  it('before signing in', async () => {
    const page = await visits.visit(null)
    for (const [what, path] of Object.entries({
      'first screen': '/',
      'sign-in': '/sign-in',
      'sign-up': '/sign-up',
      invitation: await invitation(),
      help: '/help',
      nowhere: '/no/such/place',
      recorder: '/?step=record'
    })) {
      await page.goto('about:blank')
      await page.goto(path)
      await page.getByRole('heading', { level: 1 }).waitFor()
      if (what === 'invitation') await page.getByRole('textbox', { name: 'Your name' }).waitFor()
      await look(page, what)
    }
    await page.goto('/sign-in')
    await page.getByRole('button', { name: 'Sign in' }).click()
    await look(page, 'sign-in with faults')
    await page.goto('/')
    await hearOwn(page, 'Choose a recording')
    await look(page, 'own recording')
    await page.getByRole('button', { name: 'Keep this recording' }).click()
    await look(page, 'keeping it, by somebody new', dialog)
  })

  it('signed in', async () => {
    const page = await visits.visit('mara')
    for (const [what, path] of Object.entries({
      'first screen': '/',
      account: '/account',
      group: `/groups/${demoGroup.id}`,
      people: `/groups/${demoGroup.id}/people`,
      tune: `/tunes/${demoId('ferry-money')}`
    })) {
      await page.goto(path)
      await page.getByRole('heading', { level: 1 }).waitFor()
      await look(page, what)
    }
    await page.getByRole('button', { name: 'Write it as text' }).click()
    await look(page, 'chart as text', 'main')
    await page.goto('/')
    await hearOwn(page, 'Choose recordings')
    await page.getByRole('button', { name: 'Keep this recording' }).click()
    await page.getByRole('dialog').getByRole('textbox', { name: 'Title' }).waitFor()
    await look(page, 'keeping a recording', dialog)
    await page.getByRole('button', { name: 'Trim or shrink before sending' }).click()
    await look(page, 'trimming', dialog)
    await page.goto(`/groups/${demoGroup.id}/people`)
    await page.getByRole('button', { name: 'Invite somebody' }).click()
    await look(page, 'inviting', dialog)
    await page.goto(`/groups/${demoGroup.id}`)
    await page.getByRole('button', { name: /^Your account/ }).click()
    await expectNoViolations(page, 'account menu', menu)
  })

  it('at the desk', async () => {
    const page = await visits.visit('mara')
    await openDesk(page, takePath('ferry-money-band-rehearsal'))
    await look(page, 'desk')
    await markBars(page, 5, 8)
    const first = comments(page).getByRole('article').first()
    await first.getByRole('button', { name: 'Answer' }).click()
    await look(page, 'desk with a selection and an answer begun')
    await page.getByRole('button', { name: 'Bars and chords as a table' }).click()
    await page.getByRole('dialog').waitFor()
    await look(page, 'table of bars', dialog)
    await page.getByRole('dialog').getByRole('button', { name: 'Close' }).last().click()
    await transport(page).getByRole('button', { name: 'Keys and pedals' }).click()
    await page.getByRole('dialog').waitFor()
    await look(page, 'keys', dialog)
    await page.keyboard.press('Escape')
    await page.getByRole('button', { name: 'Edit bars' }).click()
    await look(page, 'bars, tapping', barsPanel)
    for (const part of ['One line', 'Counting', 'Form']) {
      await page.getByRole('tab', { name: part }).click()
      await look(page, `bars, ${part}`, barsPanel)
    }
    await page.getByRole('button', { name: 'Close the bars' }).click()
    await first.getByRole('button', { name: /^More for comment/ }).click()
    await expectNoViolations(page, 'menu of a comment', menu)
    await page.keyboard.press('Escape')
    await page.getByRole('tab', { name: 'People' }).click()
    await look(page, 'people of the take', tabPanel)
    await page.getByRole('button', { name: 'Listen together' }).click()
    await page.getByRole('group', { name: 'Listening session' }).waitFor()
    await look(page, 'desk in a session')
    await page.getByRole('button', { name: 'Session', exact: true }).click()
    await expectNoViolations(page, 'menu of the session', menu)
  }, 240_000)

  it('at the desk of a take without bars', async () => {
    const page = await visits.visit('mara')
    await visits.house.rows('delete from documents where take_id = $1', [demoId('quay-lantern-pell-free-introduction')])
    await openDesk(page, takePath('quay-lantern-pell-free-introduction'))
    await look(page, 'desk without bars')
  })
})
