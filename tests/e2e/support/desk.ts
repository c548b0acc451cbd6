// What a person does and reads at the desk, by the names that a screen reader would say.
import { expect as expectSoon } from 'vitest'
import type { Locator, Page } from 'playwright-core'
import { demoId, type demoTakes } from '../../../seeds/02_demo_group.ts'

export type DemoTake = (typeof demoTakes)[number]
export const takePath = (slug: DemoTake, query = ''): string => `/takes/${demoId(slug)}${query}`

export const transport = (page: Page): Locator => page.getByRole('region', { name: 'Transport' })
export const comments = (page: Page): Locator => page.getByRole('feed', { name: 'Comments' })
export const writeBox = (page: Page): Locator => page.getByRole('textbox', { name: /^Write about / })
export const bar = (page: Page, number: number): Locator => page.locator(`[data-bar="${number}"]`)

/** Opens an address of the desk and waits until the sound is there. */
export const openDesk = async (page: Page, path: string): Promise<void> => {
  await page.goto(path)
  await deskIsReady(page)
}
export const deskIsReady = async (page: Page): Promise<void> => {
  await transport(page).getByRole('button', { name: 'Play', exact: true }).waitFor()
  await transport(page).locator('button[aria-label="On a bar"]:enabled').waitFor()
}

/** Where the line is, seconds, as the transport says it: m:ss.d. */
export const placeSec = async (page: Page): Promise<number> => {
  const words = (await transport(page).locator('[aria-live="off"]').textContent()) ?? ''
  const [minutes = NaN, seconds = NaN] = words.split(':').map(Number)
  return minutes * 60 + seconds
}

export const play = (page: Page) => transport(page).getByRole('button', { name: 'Play', exact: true }).click()
export const pause = (page: Page) => transport(page).getByRole('button', { name: 'Pause', exact: true }).click()
export const speed = (page: Page): Locator => transport(page).getByRole('slider', { name: 'Speed' })
export const loopButton = (page: Page): Locator => transport(page).getByRole('button', { name: /loop/i })

/** Until `look` is content with what it finds. */
export const soon = async (look: () => Promise<void>, timeout = 20_000): Promise<void> => {
  await expectSoon
    .poll(
      async () =>
        look().then(
          () => 'so',
          (error: unknown) => String(error)
        ),
      { timeout, interval: 100 }
    )
    .toBe('so')
}

/** The line moves by itself, forward. */
export const isMoving = async (page: Page): Promise<void> => {
  const from = await placeSec(page)
  await expectSoon.poll(() => placeSec(page), { timeout: 20_000, interval: 50 }).not.toBe(from)
}

/** Selects bars with two presses, without a drag. */
export const markBars = async (page: Page, first: number, last: number): Promise<void> => {
  await page.getByRole('button', { name: 'Mark bars' }).click()
  await bar(page, first).click()
  await bar(page, last).click()
}
