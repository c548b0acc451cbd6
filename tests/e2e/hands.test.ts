// The core tasks with the keyboard alone, and with single clicks alone.
import { randomUUID } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Locator, Page } from 'playwright-core'
import { demoGroup } from '../../seeds/01_personas.ts'
import { openLink, pluck } from './support/bring.ts'
import {
  bar,
  comments,
  deskIsReady,
  isMoving,
  loopButton,
  openDesk,
  placeSec,
  soon,
  speed,
  takePath,
  transport,
  writeBox
} from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const folder = mkdtempSync(join(tmpdir(), 'plumbline-e2e-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
const visits = useVisits()
const ownLine = join(folder, 'own line.wav')
beforeAll(() => void pluck(folder, 'own line.wav', 9))

/** Counts what the pointer does, and everything that is done to a sound. */
const watchHands = `
  window.hands = { moves: 0, drags: 0, sound: 0 }
  addEventListener('pointermove', (event) => {
    window.hands.moves += 1
    if (event.buttons !== 0) window.hands.drags += 1
  }, true)
  for (const name of ['play', 'pause', 'load']) {
    const own = HTMLMediaElement.prototype[name]
    HTMLMediaElement.prototype[name] = function (...rest) {
      window.hands.sound += 1
      return own.apply(this, rest)
    }
  }
  for (const name of ['currentTime', 'playbackRate']) {
    const own = Object.getOwnPropertyDescriptor(HTMLMediaElement.prototype, name)
    Object.defineProperty(HTMLMediaElement.prototype, name, {
      ...own,
      set(value) {
        window.hands.sound += 1
        own.set.call(this, value)
      }
    })
  }
  // The engine of our own is told everything through its worklet's port.
  const post = MessagePort.prototype.postMessage
  MessagePort.prototype.postMessage = function (message, ...rest) {
    if (['command', 'volume', 'take'].includes(message?.kind)) window.hands.sound += 1
    return post.call(this, message, ...rest)
  }`
const hands = (page: Page) =>
  page.evaluate(() => (window as unknown as { hands: { moves: number; drags: number; sound: number } }).hands)

const link = async (): Promise<string> => {
  const cookie = await visits.house.cookieOf('mara')
  const answer = await fetch(`${visits.house.url}/api/groups/${demoGroup.id}/invitations`, {
    method: 'POST',
    headers: { origin: visits.house.url, 'content-type': 'application/json', cookie: `${cookie.name}=${cookie.value}` },
    body: JSON.stringify({ id: randomUUID(), role: 'member', note: '' })
  })
  return `/join#${((await answer.json()) as { token: string }).token}`
}

/** How one hand gets things done. */
interface Hand {
  press(what: Locator): Promise<void>
  write(where: Locator, text: string): Promise<void>
  selectBars(page: Page, first: number, last: number): Promise<void>
  halfSpeed(page: Page): Promise<void>
}

/** Tab until the focus is there; a group with a single tab stop is walked with arrows. */
const tabTo = async (page: Page, what: Locator): Promise<void> => {
  await what.waitFor()
  for (let step = 0; step < 150; step += 1) {
    const at = await what.evaluate((element) => {
      const active = document.activeElement
      if (element === active) return 'there'
      const group = element.closest('[role="toolbar"], [role="tablist"], [role="menu"]')
      if (!group?.contains(active) || (element as HTMLElement).tabIndex >= 0) return 'elsewhere'
      return group.getAttribute('role') === 'menu' ? 'above' : 'beside'
    })
    if (at === 'there') return
    await page.keyboard.press(at === 'above' ? 'ArrowDown' : at === 'beside' ? 'ArrowRight' : 'Tab')
  }
  throw new Error(`the keyboard does not get to ${String(what)}`)
}

const keys: Hand = {
  press: async (what) => {
    await tabTo(what.page(), what)
    await what.page().keyboard.press('Enter')
  },
  write: async (where, text) => {
    await tabTo(where.page(), where)
    await where.page().keyboard.type(text)
  },
  selectBars: async (page, first, last) => {
    await tabTo(page, page.locator('[data-bar][tabindex="0"]'))
    while (!(await bar(page, first).evaluate((cell) => cell === document.activeElement)))
      await page.keyboard.press('ArrowRight')
    for (let step = first; step < last; step += 1) await page.keyboard.press('Shift+ArrowRight')
  },
  halfSpeed: async (page) => {
    await tabTo(page, speed(page))
    for (let step = 0; step < 5; step += 1) await page.keyboard.press('PageDown')
  }
}
const clicks: Hand = {
  press: (what) => what.click(),
  write: async (where, text) => {
    await where.click()
    await where.page().keyboard.type(text)
  },
  selectBars: async (page, first, last) => {
    await page.getByRole('button', { name: 'Mark bars' }).click()
    await bar(page, first).click()
    await bar(page, last).click()
  },
  halfSpeed: async (page) => {
    const box = await speed(page).boundingBox()
    if (!box) throw new Error('there is no speed')
    await speed(page).click({ position: { x: 8 + ((box.width - 16) * (50 - 20)) / 130, y: box.height / 2 } })
  }
}

const doAll = async (page: Page, hand: Hand, kind: 'keys' | 'clicks'): Promise<void> => {
  // Accept an invitation, which opens an account.
  await page.goto(await link())
  await hand.write(page.getByRole('textbox', { name: 'Your name' }), `Rolf ${kind}`)
  await hand.write(page.getByRole('textbox', { name: 'E-mail' }), `rolf-${kind}@pier.example`)
  await hand.write(page.getByLabel('Password', { exact: true }), 'seven quiet lanterns')
  await hand.press(page.getByRole('button', { name: 'Open an account and join' }))
  await page.getByRole('heading', { name: 'Harbour Street' }).waitFor()
  // Sign out and in.
  await hand.press(page.getByRole('button', { name: /^Your account/ }))
  await hand.press(page.getByRole('menuitem', { name: 'Sign out' }))
  await hand.press(page.getByRole('link', { name: 'Sign in' }).first())
  await hand.write(page.getByRole('textbox', { name: 'E-mail' }), `rolf-${kind}@pier.example`)
  await hand.write(page.getByLabel('Password', { exact: true }), 'seven quiet lanterns')
  await hand.press(page.getByRole('button', { name: 'Sign in' }))
  await page.getByRole('heading', { name: 'What you play and hear' }).waitFor()

  // Upload a take.
  const [chooser] = await Promise.all([
    page.waitForEvent('filechooser'),
    hand.press(page.getByRole('button', { name: 'Choose recordings' }))
  ])
  await chooser.setFiles(ownLine)
  await page.getByRole('heading', { name: 'own line.wav' }).waitFor()
  await hand.press(page.getByRole('button', { name: 'Keep this recording' }))
  const agreed = page.getByRole('checkbox', { name: /those who do have agreed/ })
  if (kind === 'keys') {
    await tabTo(page, agreed)
    await page.keyboard.press('Space')
  } else await agreed.click()
  await hand.press(page.getByRole('dialog').getByRole('button', { name: 'Keep it' }))
  await openLink(page, 'own line').waitFor({ timeout: 60_000 })
  await hand.press(openLink(page, 'own line'))
  await deskIsReady(page)

  // Tap and correct a bar map.
  await hand.press(page.getByRole('button', { name: 'Lay the bars' }))
  await hand.press(page.getByRole('button', { name: 'Play and tap' }))
  const pad = page.getByRole('button', { name: 'Tap on every beat' })
  await pad.waitFor()
  for (let n = 0; n < 10; n += 1) {
    while ((await placeSec(page)) < 1 + n / 2) await page.waitForTimeout(8)
    if (kind === 'keys') await page.keyboard.press('t')
    else await pad.click()
  }
  await hand.press(page.getByRole('button', { name: 'Stop and look' }))
  await hand.press(page.getByRole('button', { name: 'Keep these bars' }))
  await hand.press(page.getByRole('tab', { name: 'One line' }))
  await hand.press(page.getByRole('button', { name: '10 ms later' }))
  await soon(async () =>
    expect(await page.getByRole('button', { name: 'Undo the last change of the bars' }).isEnabled()).toBe(true)
  )

  // Select bars 5 to 8 and loop them, at half speed.
  await page.goto(takePath('ferry-money-band-rehearsal'))
  await deskIsReady(page)
  await hand.selectBars(page, 5, 8)
  await page.getByRole('textbox', { name: 'Write about bars 5 to 8' }).waitFor()
  expect(await loopButton(page).getAttribute('aria-pressed')).toBe('true')
  await hand.press(transport(page).getByRole('button', { name: 'Play', exact: true }))
  await isMoving(page)
  await hand.halfSpeed(page)
  expect(Number(await speed(page).inputValue())).toBeGreaterThanOrEqual(48)
  expect(Number(await speed(page).inputValue())).toBeLessThanOrEqual(52)

  // Comment on the selection, move the comment's span, answer and settle.
  await hand.write(writeBox(page), `What is held here? ${kind}`)
  await hand.press(page.getByRole('button', { name: 'Say it' }))
  const said = comments(page)
    .getByRole('article')
    .filter({ hasText: `What is held here? ${kind}` })
  await said.waitFor()
  await soon(async () => expect(await said.getAttribute('aria-label')).toContain('bars 5 to 8'))
  await hand.press(said.getByRole('button', { name: /^More for comment/ }))
  await hand.press(page.getByRole('menuitem', { name: 'Move it' }))
  await hand.press(said.getByRole('button', { name: 'End a beat later' }))
  await soon(async () => expect(await said.getAttribute('aria-label')).not.toContain('bars 5 to 8,'))
  await hand.press(said.getByRole('button', { name: 'Done' }))
  await hand.press(said.getByRole('button', { name: 'Answer' }))
  await page.getByRole('textbox', { name: 'Your answer' }).waitFor()
  await page.keyboard.type('The root.')
  await hand.press(said.getByRole('listitem').getByRole('button', { name: 'Answer' }))
  await said.getByText('The root.').waitFor()
  await hand.press(said.getByRole('button', { name: 'Settle' }))
  await said.getByRole('button', { name: 'Open again' }).waitFor()

  // Join a session, step away and back.
  await hand.press(page.getByRole('tab', { name: 'People' }))
  await hand.press(page.getByRole('button', { name: 'Join them' }))
  const session = page.getByRole('group', { name: 'Listening session' })
  await hand.press(session.getByRole('button', { name: 'Step away' }))
  await session.getByText('you have stepped away').waitFor()
  await hand.press(session.getByRole('button', { name: 'Step back in' }))
  await session.getByRole('button', { name: 'Step away' }).waitFor()
}

/** Somebody has opened a session that can be joined. */
const openSession = async (): Promise<Page> => {
  const mara = await visits.visit('mara')
  await openDesk(mara, takePath('ferry-money-band-rehearsal'))
  await mara.getByRole('tab', { name: 'People' }).click()
  await mara.getByRole('button', { name: /Listen together|Join them/ }).click()
  await mara.getByRole('group', { name: 'Listening session' }).waitFor()
  return mara
}

it('lets the core tasks be done with the keyboard alone', async () => {
  await openSession()
  const page = await visits.visit(null, { before: watchHands })
  await doAll(page, keys, 'keys')
  expect((await hands(page)).moves).toBe(0)
})

it('lets the core tasks be done with single clicks, without a drag', async () => {
  await openSession()
  const page = await visits.visit(null, { before: watchHands })
  await doAll(page, clicks, 'clicks')
  expect((await hands(page)).drags).toBe(0)
})

it('takes letters typed into a comment for words and never for the sound', async () => {
  const page = await visits.visit('jory', { before: watchHands })
  await openDesk(page, takePath('ferry-money-band-rehearsal'))
  await writeBox(page).click()
  await page.waitForTimeout(700)
  const before = (await hands(page)).sound
  await page.keyboard.type("abcdefghijklmnopqrstuvwxyz 0123456789 [],.=?'")
  await page.waitForTimeout(500)
  expect((await hands(page)).sound - before).toBe(0)
  expect(await writeBox(page).inputValue()).toBe("abcdefghijklmnopqrstuvwxyz 0123456789 [],.=?'")
  // The same keys elsewhere do act: the count above can rise.
  await bar(page, 3).focus()
  await page.keyboard.press('=')
  await page.keyboard.press('l')
  await page.keyboard.press(',')
  await soon(async () => expect((await hands(page)).sound).toBeGreaterThan(before))
})
