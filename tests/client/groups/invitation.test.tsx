import { cleanup, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { Route, Routes } from 'react-router-dom'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { InvitationRoute } from '@client/app/routes/invitation-route'
import { SignInRoute } from '@client/app/routes/sign-in-route'
import { answering, fine, refused, show } from '../account/answering'

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const token = 'tok_0123456789abcdefghijklmnopqrstuvwxyz_-AB'
const groupId = '6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f0002'
const me = {
  id: '6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f0001',
  name: 'Ada',
  email: 'ada@x.example',
  isOperator: false,
  tapLagMs: null,
  memberships: []
}
const group = { id: groupId, name: 'Harbour Street', role: 'member', isRosterShown: false, lastSeq: 1, abilities: [] }
const look = { 'POST /api/invitations/look': fine({ groupName: 'Harbour Street', role: 'member', invitedBy: 'Mara' }) }

const open = (at: string) =>
  show(
    <Routes>
      <Route path="/join" element={<InvitationRoute />} />
      <Route path="/sign-in" element={<SignInRoute />} />
      <Route path="*" element={null} />
    </Routes>,
    at
  )
const address = (): string => screen.getByLabelText('Address').textContent ?? ''

describe('InvitationRoute', () => {
  // OWASP ASVS 5.0, V14.2.1: secrets travel in the body, never in an address.
  it('lets a stranger sign in, come back and join, with the token in no requested address and in no query', async () => {
    let isIn = false
    const asked = answering({
      ...look,
      'GET /api/me': () => (isIn ? fine(me) : refused('sign-in-needed')),
      'POST /api/sign-in': () => {
        isIn = true
        return fine(me)
      },
      'POST /api/invitations/accept': fine(group)
    })
    const user = userEvent.setup()
    open(`/join#${token}`)
    expect(await screen.findByText(/Mara invites you to/u)).toBeDefined()
    const signIn = (await screen.findAllByRole('link', { name: 'Sign in' })).find((link) =>
      link.getAttribute('href')?.includes('next=')
    )
    if (!signIn) throw new Error('no way to sign in and come back')
    await user.click(signIn)
    expect(address().split('#')[0]).not.toContain(token)
    await user.type(screen.getByLabelText('E-mail'), me.email)
    await user.type(screen.getByLabelText('Password'), 'four plain words here{Enter}')
    await user.click(await screen.findByRole('button', { name: 'Join as member' }))
    await waitFor(() => expect(address()).toBe(`/groups/${groupId}`))
    expect(asked.filter(({ url }) => url.includes(token))).toEqual([])
    expect(asked.find(({ url }) => url === '/api/invitations/accept')?.body).toEqual({ token })
  })

  it('opens an account without asking for a group', async () => {
    const asked = answering({
      ...look,
      'GET /api/me': refused('sign-in-needed'),
      'POST /api/sign-up': fine({ ...me, memberships: [{ groupId, groupName: 'Harbour Street', role: 'member' }] }, 201)
    })
    const user = userEvent.setup()
    open(`/join#${token}`)
    await user.type(await screen.findByLabelText('Your name'), 'Ada')
    await user.type(screen.getByLabelText('E-mail'), me.email)
    await user.type(screen.getByLabelText('Password'), 'four plain words here{Enter}')
    await waitFor(() => expect(address()).toBe(`/groups/${groupId}`))
    const body = asked.find(({ url }) => url === '/api/sign-up')?.body
    expect(body).toMatchObject({ name: 'Ada', invitation: token })
    expect(body).not.toHaveProperty('group')
  })

  it('says that a used link is used up and what to do, and offers no form', async () => {
    answering({ 'GET /api/me': refused('sign-in-needed'), 'POST /api/invitations/look': refused('gone') })
    open(`/join#${token}`)
    expect((await screen.findByRole('alert')).textContent).toMatch(/cannot be used any more.*Ask whoever sent it/u)
    expect(screen.queryByRole('textbox')).toBeNull()
  })

  it('asks nothing of the server when the link has lost its end', async () => {
    const asked = answering({ 'GET /api/me': fine(me) })
    open('/join')
    expect((await screen.findByRole('alert')).textContent).toContain('This link is not whole')
    expect(asked.some(({ url }) => url.startsWith('/api/invitations'))).toBe(false)
  })
})
