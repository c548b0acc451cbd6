import { cleanup, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import type { Group, GroupPerson } from '@shared/contracts/groups'
import { InviteDialog } from '@client/features/groups/invite-dialog'
import { Roster } from '@client/features/groups/roster'
import { UnheardTakes } from '@client/features/groups/unheard-takes'
import { answering, fine, show } from '../account/answering'
import { standInForLayers } from '../ui/layers-stand-in'

beforeAll(standInForLayers)
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const uuid = (n: number): string => `6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f00${String(n).padStart(2, '0')}`
const person = (n: number, name: string, role: GroupPerson['role']): GroupPerson => ({
  id: uuid(n),
  name,
  role,
  isMinor: false,
  hasGuardianConsent: false,
  joinedAt: '2026-11-24T19:05:00Z'
})
const people = [person(1, 'Ada', 'member'), person(2, 'Mara', 'teacher'), person(3, 'Pell', 'member')]
const group = (abilities: string[], role: Group['role'] = 'member'): Group => ({
  id: uuid(9),
  name: 'Harbour Street',
  role,
  isRosterShown: true,
  lastSeq: 1,
  abilities
})

const choicesFor = async (name: string): Promise<string[]> => {
  const button = screen.queryByRole('button', { name: `What to do about ${name}` })
  if (!button) return []
  const user = userEvent.setup()
  await user.click(button)
  const found = screen.getAllByRole('menuitem', { hidden: true }).map((item) => item.textContent ?? '')
  await user.click(button)
  return found
}
const roster = (shown: Group) => show(<Roster group={shown} people={people} links={[]} meId={uuid(1)} />)

describe('Roster', () => {
  it('offers nothing to somebody without abilities, even if the role says owner', async () => {
    roster(group([], 'owner'))
    for (const { name } of people) expect(await choicesFor(name)).toEqual([])
  })

  it('offers roles and removal with group:set-role, even if the role says listener', async () => {
    roster(group(['group:set-role'], 'listener'))
    expect(await choicesFor('Pell')).toEqual(['Change role', 'Remove from the group'])
    expect(await choicesFor('Ada')).toEqual(['Change role'])
  })

  it('offers a link only with group:link, and only to those who teach', async () => {
    roster(group(['group:link', 'group:leave']))
    expect(await choicesFor('Mara')).toEqual(['Ask to teach you'])
    expect(await choicesFor('Pell')).toEqual([])
    expect(await choicesFor('Ada')).toEqual(['Leave the group'])
  })

  it('marks who is under age only where the answer says so', () => {
    const minor = { ...person(4, 'Wren', 'member'), isMinor: true, hasGuardianConsent: true }
    show(<Roster group={group([])} people={[...people, minor]} links={[]} meId={uuid(1)} />)
    expect(screen.getAllByText('under age, a guardian has agreed')).toHaveLength(1)
  })
})

describe('InviteDialog', () => {
  it('gives the higher roles only to those who may set roles', () => {
    show(<InviteDialog group={group(['group:invite'], 'owner')} onClose={() => undefined} />)
    expect(screen.queryByRole('radio', { name: /^owner/u })).toBeNull()
    expect(screen.getByRole('radio', { name: /^listener/u })).toBeDefined()
    cleanup()
    show(<InviteDialog group={group(['group:invite', 'group:set-role'])} onClose={() => undefined} />)
    expect(screen.getByRole('radio', { name: /^owner/u })).toBeDefined()
  })

  it('shows the link with its token behind #, once', async () => {
    answering({
      [`POST /api/groups/${uuid(9)}/invitations`]: fine(
        {
          id: uuid(5),
          role: 'member',
          note: '',
          createdBy: { id: uuid(1), name: 'Ada' },
          createdAt: '2026-12-01T10:00:00Z',
          expiresAt: '2026-12-15T10:00:00Z',
          state: 'open',
          token: 'secret-secret-secret-secret'
        },
        201
      )
    })
    show(<InviteDialog group={group(['group:invite'])} onClose={() => undefined} />)
    await userEvent.setup().click(screen.getByRole('button', { name: 'Make the link' }))
    const link = await screen.findByLabelText<HTMLInputElement>('Invitation link')
    expect(new URL(link.value).hash).toBe('#secret-secret-secret-secret')
    expect(new URL(link.value).pathname).toBe('/join')
  })
})

describe('UnheardTakes', () => {
  const card = (n: number, abilities: string[]) => ({
    id: uuid(n),
    title: `Take ${n}`,
    uploader: { id: uuid(3), name: 'Pell' },
    durationSec: 83,
    createdAt: '2026-12-01T10:00:00Z',
    abilities
  })
  it('offers to delete only what may be deleted, and no way to hear', async () => {
    answering({
      [`GET /api/groups/${uuid(9)}/takes`]: fine({
        items: [],
        cards: [card(6, ['take:delete']), card(7, [])],
        nextCursor: null
      })
    })
    show(<UnheardTakes groupId={uuid(9)} />)
    expect(await screen.findByRole('button', { name: 'Delete Take 6' })).toBeDefined()
    expect(screen.getByText('Take 7')).toBeDefined()
    expect(screen.queryByRole('button', { name: 'Delete Take 7' })).toBeNull()
    expect(screen.queryByRole('link')).toBeNull()
  })
})
