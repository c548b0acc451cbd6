// Recordings made while the tests run, and takes brought in over the wire where the way in is not what is looked at.
import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { basename, join } from 'node:path'
import type { Locator, Page } from 'playwright-core'
import { expect } from 'vitest'
import { demoGroup } from '../../../seeds/01_personas.ts'
import { ffmpeg, pluckedBass } from '../../support/media.ts'
import type { PersonKey } from '../../support/people.ts'
import type { House } from './house.ts'

export const pluck = (folder: string, name: string, seconds: number, ...options: string[]): string => {
  const path = join(folder, name)
  ffmpeg(...pluckedBass(seconds), ...options, path)
  return path
}

/** In the list of what was sent: the way to the desk of a take that has been read. */
export const openLink = (page: Page, title: string): Locator =>
  page
    .getByRole('listitem')
    .filter({ hasText: title })
    .getByRole('link', { name: /^Open it/ })

export const bringTake = async (
  house: House,
  who: PersonKey,
  path: string,
  fields: Record<string, string> = {}
): Promise<string> => {
  const cookie = await house.cookieOf(who)
  const id = randomUUID()
  const form = new FormData()
  for (const [key, value] of Object.entries({ id, title: basename(path), reach: 'group', agreed: 'yes', ...fields }))
    form.set(key, value)
  form.set('recording', new Blob([readFileSync(path)]), basename(path))
  const answer = await fetch(`${house.url}/api/groups/${demoGroup.id}/takes`, {
    method: 'POST',
    headers: { origin: house.url, cookie: `${cookie.name}=${cookie.value}` },
    body: form
  })
  if (!answer.ok) throw new Error(`${answer.status} ${await answer.text()}`)
  await expect
    .poll(async () => (await house.rows<{ state: string }>('select state from takes where id = $1', [id]))[0]?.state, {
      timeout: 60_000,
      interval: 300
    })
    .toBe('ready')
  return id
}
