import { cleanup, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import { AccountMenu } from '@client/features/account/account-menu'
import { outbox } from '@client/lib/outbox'
import { standInForLayers } from '../ui/layers-stand-in'
import { answering, fine, show } from './answering'

beforeAll(standInForLayers)
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
  vi.restoreAllMocks()
})

const id = '6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f0001'
const me = { id, name: 'Ada', email: 'ada@x.example', isOperator: false, tapLagMs: null, memberships: [] }

const signOutWith = async (unsent: number) => {
  const count = vi.spyOn(outbox, 'count').mockResolvedValue(unsent)
  const asked = answering({ 'GET /api/me': fine(me), 'POST /api/sign-out': fine({}) })
  const user = userEvent.setup()
  show(<AccountMenu />, '/account')
  await user.click(await screen.findByRole('button', { name: 'Your account, Ada' }))
  // jsdom shows no popovers, so what is in them counts as hidden there.
  await user.click(screen.getByRole('menuitem', { name: 'Sign out', hidden: true }))
  const sent = (): boolean => asked.some(({ url }) => url === '/api/sign-out')
  return { user, sent, count }
}

describe('AccountMenu', () => {
  it('signs out at once when nothing waits to be sent', async () => {
    const { sent, count } = await signOutWith(0)
    await waitFor(() => expect(sent()).toBe(true))
    expect(count).toHaveBeenCalledWith(id)
    await waitFor(() => expect(screen.getByLabelText('Address').textContent).toBe('/'))
  })

  it('asks first when work of this person has not been sent, and stays when told so', async () => {
    const { user, sent } = await signOutWith(2)
    const question = await screen.findByRole('dialog', { name: 'Sign out with unsent work?' })
    expect(question.textContent).toContain('2 things you wrote here have not reached the server yet')
    expect(sent()).toBe(false)
    await user.click(screen.getByRole('button', { name: 'Stay signed in' }))
    expect(screen.queryByRole('dialog')).toBeNull()
    expect(sent()).toBe(false)
  })

  it('signs out all the same when told so', async () => {
    const { user, sent } = await signOutWith(1)
    await user.click(await screen.findByRole('button', { name: 'Sign out all the same' }))
    await waitFor(() => expect(sent()).toBe(true))
  })
})
