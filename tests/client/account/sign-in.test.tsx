import { cleanup, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { Route, Routes } from 'react-router-dom'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { SignInRoute } from '@client/app/routes/sign-in-route'
import { SignUpRoute } from '@client/app/routes/sign-up-route'
import { answering, fine, refused, show } from './answering'

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const id = '6b0c2f2e-7c40-4f0e-9a8f-5b6a7a1f0001'
const me = { id, name: 'Ada', email: 'ada@x.example', isOperator: false, tapLagMs: null, memberships: [] }
const out = { 'GET /api/me': refused('sign-in-needed') }

const described = (field: HTMLElement): string =>
  (field.getAttribute('aria-describedby') ?? '')
    .split(' ')
    .map((part) => document.getElementById(part)?.textContent)
    .join(' ')

describe('SignInRoute', () => {
  it('says at each empty field what is missing, sends nothing, and puts the focus on the first', async () => {
    const asked = answering(out)
    show(<SignInRoute />, '/sign-in')
    await userEvent.setup().click(screen.getByRole('button', { name: 'Sign in' }))
    const email = screen.getByLabelText('E-mail')
    expect(described(email)).toContain('Write your e-mail address.')
    expect(described(screen.getByLabelText('Password'))).toContain('Write your password.')
    expect(document.activeElement).toBe(email)
    expect(asked.filter(({ method }) => method === 'POST')).toEqual([])
  })

  it('says in a sentence that e-mail and password do not go together, and keeps what was typed', async () => {
    answering({ ...out, 'POST /api/sign-in': refused('sign-in-failed') })
    const user = userEvent.setup()
    show(<SignInRoute />, '/sign-in')
    await user.type(screen.getByLabelText('E-mail'), 'ada@x.example')
    await user.type(screen.getByLabelText('Password'), 'not the one{Enter}')
    expect((await screen.findByRole('alert')).textContent).toMatch(/do not go together/u)
    expect(screen.getByLabelText<HTMLInputElement>('E-mail').value).toBe('ada@x.example')
    expect(screen.getByLabelText<HTMLInputElement>('Password').value).toBe('not the one')
  })

  // WCAG 2.2, 3.3.8 and ASVS 5.0 V6.2.7: paste and password managers are allowed.
  it('takes a pasted password, shows it on request, and is known to password managers', async () => {
    const asked = answering({ ...out, 'POST /api/sign-in': fine(me) })
    const user = userEvent.setup()
    show(<SignInRoute />, '/sign-in?next=/account')
    const password = screen.getByLabelText<HTMLInputElement>('Password')
    expect(password.autocomplete).toBe('current-password')
    expect(screen.getByLabelText<HTMLInputElement>('E-mail').autocomplete).toBe('username')
    await user.type(screen.getByLabelText('E-mail'), 'ada@x.example')
    await user.click(password)
    await user.paste(' Pässwort mit Rand ')
    expect(password.type).toBe('password')
    await user.click(screen.getByLabelText('Show password'))
    expect(password.type).toBe('text')
    await user.click(screen.getByRole('button', { name: 'Sign in' }))
    await waitFor(() => expect(screen.getByLabelText('Address').textContent).toBe('/account'))
    expect(asked.at(-1)).toMatchObject({ body: { email: 'ada@x.example', password: ' Pässwort mit Rand ' } })
  })

  it('goes home when asked to go on to another site', async () => {
    answering({ 'GET /api/me': fine(me) })
    show(<SignInRoute />, '/sign-in?next=//elsewhere.example/')
    await waitFor(() => expect(screen.getByLabelText('Address').textContent).toBe('/'))
  })
})

describe('SignUpRoute', () => {
  it('asks for three things and names the group by itself', async () => {
    const asked = answering({ ...out, 'POST /api/sign-up': fine(me, 201) })
    const user = userEvent.setup()
    show(<SignUpRoute />, '/sign-up')
    expect(document.querySelectorAll('input:not([type="checkbox"])')).toHaveLength(3)
    await user.type(screen.getByLabelText('Your name'), 'Ada')
    await user.type(screen.getByLabelText('E-mail'), 'ada@x.example')
    await user.type(screen.getByLabelText('Password'), 'four plain words here{Enter}')
    await waitFor(() => expect(asked.some(({ url }) => url === '/api/sign-up')).toBe(true))
    expect(asked.find(({ url }) => url === '/api/sign-up')?.body).toMatchObject({
      name: 'Ada',
      group: { name: 'Ada’s room' }
    })
  })

  it('shows at the password what the server has against it', async () => {
    const message = 'This password is one of those tried first by strangers. Take another.'
    answering({
      ...out,
      'POST /api/sign-up': refused('invalid', { errors: [{ in: 'body', path: 'password', message }] })
    })
    const user = userEvent.setup()
    show(<SignUpRoute />, '/sign-up')
    await user.type(screen.getByLabelText('Your name'), 'Ada')
    await user.type(screen.getByLabelText('E-mail'), 'ada@x.example')
    await user.type(screen.getByLabelText('Password'), 'password1{Enter}')
    const password = screen.getByLabelText('Password')
    await waitFor(() => expect(described(password)).toContain(message))
    expect(document.activeElement).toBe(password)
  })

  it('takes a known e-mail along to the sign-in, so that it is not typed twice', async () => {
    answering({ ...out, 'POST /api/sign-up': refused('already-there') })
    const user = userEvent.setup()
    show(
      <Routes>
        <Route path="/sign-up" element={<SignUpRoute />} />
        <Route path="/sign-in" element={<SignInRoute />} />
      </Routes>,
      '/sign-up'
    )
    await user.type(screen.getByLabelText('Your name'), 'Ada')
    await user.type(screen.getByLabelText('E-mail'), 'ada@x.example')
    await user.type(screen.getByLabelText('Password'), 'four plain words here{Enter}')
    await user.click(await screen.findByRole('link', { name: 'Sign in with ada@x.example' }))
    await waitFor(() => expect(screen.queryByLabelText('Your name')).toBeNull())
    expect(screen.getByLabelText<HTMLInputElement>('E-mail').value).toBe('ada@x.example')
  })
})
