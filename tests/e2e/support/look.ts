// What can be measured on a page: faults that axe finds, in both themes, and whether it fits its width.
import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { expect } from 'vitest'

/**
 * Axe would copy the styles of shadow trees into a document of its own, which the policy refuses and reports. What is
 * not wrong it need not describe.
 */
const quiet: RunOptions = { preload: false, resultTypes: ['violations'] }
type RunOptions = Parameters<AxeBuilder['options']>[0]
const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']

/** In the page itself: there is no frame within it, for which axe would gather its findings on a page of their own. */
const violationsOf = async (page: Page, within: string, options: RunOptions): Promise<string[]> =>
  (
    await new AxeBuilder({ page })
      .setLegacyMode()
      .include(within)
      .options({ ...quiet, ...options })
      .analyze()
  ).violations.flatMap(({ id, nodes }) =>
    // What lies under the transport at the foot is scrolled out from there.
    nodes
      .filter(({ failureSummary }) => !failureSummary?.includes('obscured'))
      .map(({ target, failureSummary }) => `${id}: ${target.join(' ')} ${failureSummary?.split('\n')[1] ?? ''}`)
  )

/** `within`: what is new, where the rest of the page has been looked at. Everything in daylight, with target sizes of 24 px (WCAG 2.2, 2.5.8); the colours once more late in the evening. */
export const expectNoViolations = async (page: Page, what: string, within = 'html'): Promise<void> => {
  await page.emulateMedia({ colorScheme: 'light' })
  const day = await violationsOf(page, within, {
    runOnly: { type: 'tag', values: tags },
    rules: { 'target-size': { enabled: true } }
  })
  await page.emulateMedia({ colorScheme: 'dark' })
  const night = await violationsOf(page, within, { runOnly: ['color-contrast', 'link-in-text-block'] })
  await page.emulateMedia({ colorScheme: 'light' })
  expect.soft(day.join('\n'), `${what}, light`).toBe('')
  expect.soft(night.join('\n'), `${what}, dark`).toBe('')
}

/** What sticks out to the side. */
const measure = (page: Page): Promise<{ over: number; culprits: string[] }> =>
  page.evaluate(() => {
    const root = document.documentElement
    const wide = [...document.querySelectorAll('body *')].filter(
      (element) => element.getBoundingClientRect().right > root.clientWidth + 0.5
    )
    const words = wide
      .slice(0, 4)
      .map((element) => `${element.tagName} ${element.className} ${element.textContent}`.slice(0, 120))
    return { over: root.scrollWidth - root.clientWidth, culprits: words }
  })

/** The lanes take the new width in with the next frames: what still sticks out after three seconds stays. */
const settled = async (page: Page): Promise<{ over: number; culprits: string[] }> => {
  let found = await measure(page)
  for (let tries = 0; tries < 30 && found.over > 0; tries += 1) {
    await page.waitForTimeout(100)
    found = await measure(page)
  }
  return found
}

/** No scrolling to the side, and targets of 24 px or room around them, at each width. */
export const expectToFit = async (page: Page, what: string, within = 'html'): Promise<void> => {
  const widths = [360, 320]
  const before = page.viewportSize()
  for (const width of widths) {
    await page.setViewportSize({ width, height: 740 })
    const { over, culprits } = await settled(page)
    expect.soft(over > 0 ? culprits.join('\n') : '', `${what} at ${width} px`).toBe('')
  }
  const small = await violationsOf(page, within, {
    runOnly: ['target-size'],
    rules: { 'target-size': { enabled: true } }
  })
  expect.soft(small.join('\n'), `${what}, targets at ${widths.at(-1)} px`).toBe('')
  if (before) await page.setViewportSize(before)
}
