// From an invitation link to the first comment, in two browsers.
import { expect, it } from 'vitest'
import { demoGroup } from '../../seeds/01_personas.ts'
import {
  bar,
  comments,
  deskIsReady,
  isMoving,
  loopButton,
  openDesk,
  pause,
  placeSec,
  play,
  soon,
  speed,
  takePath,
  writeBox
} from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const visits = useVisits()

it('leads a newcomer from an invitation link to a first comment that is heard of, answered and settled', async () => {
  const mara = await visits.visit('mara')
  await mara.goto(`/groups/${demoGroup.id}/people`)
  await mara.getByRole('button', { name: 'Invite somebody' }).click()
  await mara.getByRole('textbox', { name: /For whom/ }).fill('Nils, from the Tuesday class')
  await mara.getByRole('button', { name: 'Make the link' }).click()
  const link = await mara.getByRole('textbox', { name: 'Invitation link' }).inputValue()
  await mara.getByRole('button', { name: 'Done' }).click()
  await mara.getByText('Nils, from the Tuesday class').waitFor()
  await openDesk(mara, takePath('ferry-money-band-rehearsal'))

  const nils = await visits.visit(null)
  await nils.goto(link)
  await nils.getByText('Mara Kessling invites you to Harbour Street').waitFor()
  await nils.getByRole('textbox', { name: 'Your name' }).fill('Nils Arber')
  await nils.getByRole('textbox', { name: 'E-mail' }).fill('nils@tuesday.example')
  await nils.getByLabel('Password', { exact: true }).fill('seven quiet lanterns')
  await nils.getByRole('button', { name: 'Open an account and join' }).click()
  await nils.getByRole('heading', { name: 'Harbour Street' }).waitFor()
  expect(new URL(nils.url()).hash).toBe('')
  await nils.getByRole('link', { name: 'Ferry Money, Thursday rehearsal' }).click()
  await deskIsReady(nils)

  // Bars 5 to 8, with one drag along the strip; they loop at once.
  const [from, to] = [await bar(nils, 5).boundingBox(), await bar(nils, 8).boundingBox()]
  if (!from || !to) throw new Error('the strip shows no bars')
  await nils.mouse.move(from.x + 5, from.y + 10)
  await nils.mouse.down()
  await nils.mouse.move(to.x + 5, to.y + 10, { steps: 4 })
  await nils.mouse.up()
  await nils.getByText('bars 5 to 8').first().waitFor()
  expect(await loopButton(nils).getAttribute('aria-pressed')).toBe('true')
  await play(nils)
  await isMoving(nils)
  await speed(nils).focus()
  for (let step = 0; step < 5; step += 1) await nils.keyboard.press('PageDown')
  expect(await speed(nils).inputValue()).toBe('50')
  await isMoving(nils)
  await pause(nils)
  expect(await placeSec(nils)).toBeGreaterThan(0)

  await nils
    .getByRole('textbox', { name: 'Write about bars 5 to 8' })
    .fill('Do you hear the G as part of the Bb chord?')
  await nils.getByRole('button', { name: 'Say it' }).click()
  const asked = comments(mara).getByRole('article', { name: /bars 5 to 8.*question, by Nils Arber/ })
  await asked.getByText('Do you hear the G as part of the Bb chord?').waitFor()

  await asked.getByRole('button', { name: 'Answer' }).click()
  await mara.getByRole('textbox', { name: 'Your answer' }).fill('As its sixth: it leads to the A.')
  await asked.getByRole('listitem').getByRole('button', { name: 'Answer' }).click()
  const there = comments(nils).getByRole('article', { name: /by Nils Arber/ })
  await there.getByText('As its sixth: it leads to the A.').waitFor()
  await asked.getByRole('button', { name: 'Settle' }).click()
  await comments(nils)
    .getByRole('article', { name: /question, settled, by Nils Arber/ })
    .waitFor()

  // The address names the selection, for whoever may hear the take.
  await soon(async () => expect(nils.url()).toMatch(/bars=5-8/))
  const third = await visits.visit('pell')
  await openDesk(third, nils.url())
  await third.getByRole('textbox', { name: 'Write about bars 5 to 8' }).waitFor()
  expect(await bar(third, 5).getAttribute('aria-selected')).toBe('true')
  expect(await bar(third, 8).getAttribute('aria-selected')).toBe('true')
  expect(await bar(third, 9).getAttribute('aria-selected')).toBe('false')
  expect(await writeBox(third).count()).toBe(1)
})
