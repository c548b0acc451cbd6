// Bars laid by hand under a fresh take, corrected and taken back; a chart with a bar that cannot be read.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { demoId } from '../../seeds/02_demo_group.ts'
import { bringTake, pluck } from './support/bring.ts'
import { bar, comments, markBars, openDesk, placeSec, soon, writeBox } from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const folder = mkdtempSync(join(tmpdir(), 'plumbline-e2e-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
const visits = useVisits()

const lineOf = (page: Page, number: number) => page.locator(`[data-bar-line="${number}"]`)
const lineSec = async (page: Page, number: number): Promise<number> =>
  Number(await lineOf(page, number).getAttribute('aria-valuenow'))

it('lays bars from taps, moves a line by keys, undoes and redoes, and counts comments anew', async () => {
  const take = await bringTake(visits.house, 'jory', pluck(folder, 'even.wav', 16), {
    title: 'Even eighths',
    tuneId: demoId('ferry-money')
  })
  const page = await visits.visit('jory')
  await openDesk(page, `/takes/${take}`)
  await writeBox(page).fill('Here the hand is late.')
  await page.getByRole('button', { name: 'Say it' }).click()
  await comments(page)
    .getByRole('article', { name: /by Jory/ })
    .waitFor()
  expect(await comments(page).getByRole('article').first().getAttribute('aria-label')).not.toContain('bar')

  await page.getByRole('button', { name: 'Lay the bars' }).click()
  await page.getByRole('radio', { name: 'bar lines' }).check()
  await page.getByRole('button', { name: 'Play and tap' }).click()
  // A bar of 4/4 at 120 lasts two seconds; the hand goes by the sound's own place.
  await page.getByRole('button', { name: 'Tap on every bar line' }).focus()
  for (const sec of [2, 4, 6, 8, 10]) {
    while ((await placeSec(page)) < sec) await page.waitForTimeout(10)
    await page.keyboard.press('t')
  }
  await page.getByText('5 taps').waitFor()
  await page.getByRole('button', { name: 'Stop and look' }).click()
  await page.getByRole('button', { name: 'Keep these bars' }).click()
  await bar(page, 5).first().waitFor()
  const tapped = await lineSec(page, 3)
  process.stderr.write(`bar 3 tapped at 6.0 s stands at ${tapped} s\n`)
  expect(await comments(page).getByRole('article').first().getAttribute('aria-label')).toMatch(/bar|pick-up/)

  const before = await lineSec(page, 3)
  const laid = (
    await visits.house.rows<{ revision: number }>('select revision from documents where take_id = $1', [take])
  )[0]?.revision
  await lineOf(page, 3).focus()
  for (let step = 0; step < 3; step += 1) await page.keyboard.press('ArrowRight')
  await soon(async () => expect(await lineSec(page, 3)).toBeCloseTo(before + 0.03, 2))
  // What has not been sent yet is taken back without a trace; here everything has arrived.
  const revision = async () =>
    (await visits.house.rows<{ revision: number }>('select revision from documents where take_id = $1', [take]))[0]
      ?.revision
  await soon(async () => expect(await revision()).toBe(Number(laid) + 3))
  await page.getByRole('button', { name: 'Undo the last change of the bars' }).click()
  await soon(async () => expect(await lineSec(page, 3)).toBeCloseTo(before + 0.02, 2))
  await page.getByRole('button', { name: 'Do it again' }).click()
  await soon(async () => expect(await lineSec(page, 3)).toBeCloseTo(before + 0.03, 2))

  await markBars(page, 4, 5)
  await writeBox(page).fill('The second time begins here.')
  await page.getByRole('button', { name: 'Say it' }).click()
  const said = comments(page).getByRole('article').filter({ hasText: 'The second time begins here.' })
  await soon(async () => expect(await said.getAttribute('aria-label')).toMatch(/bars 4 to 5/))
  const named = await said.textContent()

  await page.getByRole('tab', { name: 'Form' }).click()
  await page.getByRole('spinbutton', { name: 'chosen bar' }).fill('4')
  await page.getByRole('spinbutton', { name: 'chosen bar' }).press('Enter')
  await page.getByRole('button', { name: 'A chorus starts at bar 4' }).click()
  await soon(async () => expect(await said.textContent()).not.toBe(named))
  await soon(async () => expect(await said.textContent()).toMatch(/2nd/))

  await page.getByRole('tab', { name: 'Counting' }).click()
  await page.getByRole('button', { name: 'Half as many beats' }).click()
  await soon(async () => expect(await said.getAttribute('aria-label')).not.toMatch(/bars 4 to 5/))
})

it('names the bar of a chart that cannot be read, and keeps what is mended', async () => {
  const page = await visits.visit('mara')
  await page.goto(`/tunes/${demoId('slack-tide')}`)
  await page.getByRole('button', { name: 'Write it as text' }).click()
  const text = page.getByRole('textbox', { name: 'The whole chart' })
  await text.fill('[A]\n| Dm7 | Em7b5 A7 | Hq9 | N.C. |')
  const faults = page.getByRole('list', { name: 'Bars that cannot be read' })
  await faults.getByText(/3/).waitFor()
  expect(await faults.textContent()).toContain('Hq9')
  expect(await page.getByRole('button', { name: 'Keep this chart' }).isDisabled()).toBe(true)
  await text.fill('[A]\n| Dm7 | Em7b5 A7 | % | N.C. |')
  await page.getByText('4 bars in 1 section, all of them can be read.').waitFor()
  await page.getByRole('button', { name: 'Keep this chart' }).click()
  await page
    .getByRole('button', { name: /^Bar 2 of .*A: .*then/ })
    .first()
    .waitFor()
})
