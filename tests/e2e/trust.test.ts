// What people write and bring stays words; what was not sent yet is sent once; who has signed out has left nothing open.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { demoGroup } from '../../seeds/01_personas.ts'
import { demoId } from '../../seeds/02_demo_group.ts'
import { openLink, pluck } from './support/bring.ts'
import { comments, deskIsReady, openDesk, soon, takePath, writeBox } from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const folder = mkdtempSync(join(tmpdir(), 'plumbline-e2e-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
const visits = useVisits()

/** Every way known to us of getting a script out of words (check 24). No slash: some of it becomes a file name. */
const corpus = [
  '<img src=x onerror=alert(1) class=planted>',
  '"><svg onload=alert(2) class=planted>',
  "'-alert(3)-'",
  '<iframe srcdoc="<b class=planted>" class=planted>',
  '{{constructor.constructor("alert(4)")()}}',
  'javascript:alert(5)',
  '<b class=planted>bold'
]

const call = (page: Page, method: string, path: string, body: unknown): Promise<number> =>
  page.evaluate(
    async (input) =>
      (
        await fetch(input.path, {
          method: input.method,
          headers: { 'content-type': 'application/json' },
          body: JSON.stringify(input.body)
        })
      ).status,
    { method, path, body }
  )

const planted = (page: Page): Promise<number> => page.locator('.planted, [onerror], [onload], [srcdoc]').count()

it('shows what people wrote as words, wherever it stands', async () => {
  const page = await visits.visit('mara')
  await openDesk(page, takePath('ferry-money-band-rehearsal'))
  for (const [index, text] of corpus.entries()) {
    await writeBox(page).fill(`${index} ${text}`)
    await page.getByRole('button', { name: 'Say it' }).click()
    await comments(page).getByText(`${index} ${text}`).waitFor()
  }
  const whole = corpus.join(' ')
  expect(await call(page, 'PATCH', '/api/me', { name: whole.slice(0, 78) })).toBe(200)
  expect(await call(page, 'PATCH', `/api/groups/${demoGroup.id}`, { name: corpus[0] })).toBe(200)
  expect(await call(page, 'PATCH', `/api/tunes/${demoId('ferry-money')}`, { title: corpus[1] })).toBe(200)

  // A file whose name and tags say it.
  const tags = ['title', 'artist', 'album', 'comment'].flatMap((key) => ['-metadata', `${key}=${whole}`])
  const path = pluck(folder, `${corpus[0]}.mp3`, 3, ...tags)
  await page.goto('/')
  const [chooser] = await Promise.all([
    page.waitForEvent('filechooser'),
    page.getByRole('button', { name: 'Choose recordings' }).click()
  ])
  await chooser.setFiles(path)
  await page.getByRole('heading', { name: corpus[0] }).waitFor()
  await page.getByRole('button', { name: 'Keep this recording' }).click()
  const keep = page.getByRole('dialog', { name: 'Keep this recording' })
  await keep.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await keep.getByRole('button', { name: 'Keep it' }).click()
  await openLink(page, corpus[0] ?? '').click({ timeout: 60_000 })
  await deskIsReady(page)
  expect(await planted(page)).toBe(0)

  // A section of the form, and chords that are none.
  await page.goto(`/tunes/${demoId('slack-tide')}`)
  await page.getByRole('button', { name: 'Write it as text' }).click()
  const text = page.getByRole('textbox', { name: 'The whole chart' })
  for (const each of corpus) {
    await text.fill(`[A]\n| Dm7 | ${each} |`)
    await page.getByRole('status').filter({ hasText: /\w/ }).first().waitFor()
    expect(await planted(page)).toBe(0)
  }
  await text.fill('[<img src=x onerror=alert(6)>]\n| Dm7 | G7 |')
  await page.getByRole('button', { name: 'Keep this chart' }).click()
  await page.getByText('<img src=x onerror=alert(6)').first().waitFor()
  expect(await planted(page)).toBe(0)

  for (const address of [
    '/',
    '/account',
    `/groups/${demoGroup.id}`,
    `/groups/${demoGroup.id}/people`,
    `/tunes/${demoId('ferry-money')}`,
    takePath('slack-tide-mara-example'),
    takePath('ferry-money-band-rehearsal')
  ]) {
    await page.goto(address)
    await page.waitForLoadState('networkidle')
    expect(await planted(page), address).toBe(0)
  }
})

it('sends what was written without a connection once, after a reload', async () => {
  visits.expectTrouble(/ERR_INTERNET_DISCONNECTED|WebSocket/)
  const page = await visits.visit('tomas')
  const take = demoId('ferry-money-tomas-alone')
  await openDesk(page, takePath('ferry-money-tomas-alone'))
  await page.getByRole('button', { name: 'Edit bars' }).click()
  await page.getByRole('tab', { name: 'One line' }).click()
  const revision = async (): Promise<number> =>
    Number(
      (
        await visits.house.rows<{ revision: number }>(
          "select revision from documents where take_id = $1 and kind = 'bar-map'",
          [take]
        )
      )[0]?.revision
    )
  const before = await revision()
  await page.context().setOffline(true)
  await page.getByRole('button', { name: '10 ms later' }).click()
  await writeBox(page).fill('Written on the train.')
  await page.getByRole('button', { name: 'Say it' }).click()
  await comments(page).getByText('sending …').waitFor()
  await page.goto('about:blank')
  await page.context().setOffline(false)
  await openDesk(page, takePath('ferry-money-tomas-alone'))
  const arrived = () =>
    visits.house.rows("select 1 from comments where take_id = $1 and text = 'Written on the train.'", [take])
  await soon(async () => expect(await arrived()).toHaveLength(1))
  await soon(async () => expect(await revision()).toBe(before + 1))
  await page.reload()
  await deskIsReady(page)
  await comments(page).getByText('Written on the train.').waitFor()
  await page.waitForTimeout(1500)
  expect(await arrived()).toHaveLength(1)
  expect(await revision()).toBe(before + 1)
})

it('shows nothing of a person who has signed out, whichever way the next one goes back', async () => {
  const page = await visits.visit(null)
  await page.goto('/sign-in')
  await page.getByRole('textbox', { name: 'E-mail' }).fill('ines@harbourstreet.example')
  await page.getByLabel('Password', { exact: true }).fill('harbour-street-demo')
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.getByRole('heading', { name: 'What you play and hear' }).waitFor()
  await page.goto(`/groups/${demoGroup.id}`)
  await page.getByRole('heading', { level: 1 }).waitFor()
  await openDesk(page, takePath('slack-tide-ines-second-try'))
  const cookies = await page.context().cookies()
  await page.getByRole('button', { name: /^Your account/ }).click()
  await page.getByRole('menuitem', { name: 'Sign out' }).click()
  await page.getByRole('link', { name: 'Sign in' }).waitFor()
  for (let step = 0; step < 2; step += 1) {
    await page.goBack()
    await page.waitForLoadState('networkidle')
    const seen = await page.locator('body').innerText()
    expect(seen).not.toMatch(/Inés|Slack Tide|Harbour Street/)
  }
  const kept = await page.evaluate(() => JSON.stringify(Object.entries(localStorage)))
  expect(kept).not.toMatch(/Inés|ines@|Slack/)
  const old = await fetch(`${visits.house.url}/api/me`, {
    headers: { cookie: cookies.map(({ name, value }) => `${name}=${value}`).join('; ') }
  })
  expect(old.status).toBe(401)
})
