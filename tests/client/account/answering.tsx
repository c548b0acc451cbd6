// A server of our own in place of fetch, and a page around what is tested: says what was asked, and answers as told.
import { QueryClientProvider } from '@tanstack/react-query'
import { render } from '@testing-library/react'
import type { ReactNode } from 'react'
import { MemoryRouter, useLocation } from 'react-router-dom'
import { vi } from 'vitest'
import { type ProblemCode, type ProblemField, problems, problemType } from '@shared/errors/problems'
import { createQueryClient } from '@client/lib/query'
import { LiveLog } from '@client/ui/live-log'
import { Toasts } from '@client/ui/toasts'

interface Asked {
  method: string
  url: string
  body: unknown
}
type Answer = { status: number; json: unknown }

export const fine = (json: unknown, status = 200): Answer => ({ status, json })
export const refused = (code: ProblemCode, extra: { detail?: string; errors?: ProblemField[] } = {}): Answer => {
  const { status, title } = problems[code]
  return { status, json: { type: problemType(code), status, title, ...extra } }
}

/** `answers` by method and path (`POST /api/sign-in`). What is not told answers 404. */
export const answering = (answers: Record<string, Answer | (() => Answer)>) => {
  const asked: Asked[] = []
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    const method = init.method ?? 'GET'
    asked.push({ method, url, body: init.body ? JSON.parse(String(init.body)) : null })
    const told = answers[`${method} ${url}`] ?? refused('not-found')
    const { status, json } = typeof told === 'function' ? told() : told
    return new Response(JSON.stringify(json), { status })
  })
  return asked
}

/** Where the page is, for looking at: path, query and fragment. */
function Address() {
  const { pathname, search, hash } = useLocation()
  return <output aria-label="Address">{pathname + search + hash}</output>
}

export const show = (what: ReactNode, at = '/') =>
  render(
    <QueryClientProvider client={createQueryClient()}>
      <LiveLog>
        <Toasts>
          <MemoryRouter initialEntries={[at]}>
            {what}
            <Address />
          </MemoryRouter>
        </Toasts>
      </LiveLog>
    </QueryClientProvider>
  )
