import { QueryClientProvider } from '@tanstack/react-query'
import { act, cleanup, fireEvent, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { opens, type Comment } from '@shared/contracts/comments'
import type { Span } from '@shared/timing/types'
import { aboutWords } from '@client/features/comments/about-words'
import { useTakeComments } from '@client/features/comments/api'
import { CommentsPanel } from '@client/features/comments/comments-panel'
import { lettersOf } from '@client/features/comments/letters'
import { createQueryClient } from '@client/lib/query'
import { freshId } from '@client/lib/ids'
import { Toasts } from '@client/ui/toasts'
import { standInForLayers } from '../ui/layers-stand-in'
import { buildComment, buildReply, mara, me } from './build-comment'

// jsdom has no IndexedDB: this keeps entries over "reloads" of the page, as the browser does.
const kept = vi.hoisted(() => new Map<string, { owner: string; place: string; value: unknown }>())
vi.mock('@client/lib/outbox', () => ({
  outbox: {
    put: async (owner: string, place: string, id: string, value: unknown) => void kept.set(id, { owner, place, value }),
    remove: async (id: string) => void kept.delete(id),
    list: async (owner: string, place: string) =>
      [...kept].filter(([, e]) => e.owner === owner && e.place === place).map(([id, { value }]) => ({ id, value })),
    count: async () => kept.size
  }
}))

/** The server, as far as comments go. */
const server = {
  comments: [] as Comment[],
  isDown: false,
  requests: [] as { method: string; url: string; body: unknown }[]
}

const answer = (method: string, url: string, body: Record<string, unknown>): unknown => {
  const id = url.split('/')[3] ?? ''
  const change = (to: (comment: Comment) => Comment): Comment | undefined => {
    server.comments = server.comments.map((comment) => (comment.id === id ? to(comment) : comment))
    return server.comments.find((comment) => comment.id === id)
  }
  if (method === 'GET') return { items: server.comments }
  if (method === 'POST' && url.endsWith('/comments')) {
    const known = server.comments.find((comment) => comment.id === body['id'])
    const made = known ?? buildComment({ ...body, author: me, isOpen: opens(body['kind'] as Comment['kind']) })
    if (!known) server.comments = [...server.comments, made]
    return made
  }
  if (url.endsWith('/settle'))
    return change((comment) => ({ ...comment, isOpen: Boolean(body['isOpen']), settledBy: body['isOpen'] ? null : me }))
  if (url.endsWith('/replies'))
    return change((comment) => ({
      ...comment,
      replies: [...comment.replies, buildReply({ id: String(body['id']), text: String(body['text']), author: me })]
    }))
  if (method === 'PATCH')
    return change((comment) => ({ ...comment, ...body, ...(body['span'] as Span | undefined) }) as Comment)
  server.comments = server.comments.filter((comment) => comment.id !== id)
  return {}
}

beforeEach(() => {
  standInForLayers()
  HTMLElement.prototype.scrollIntoView = () => {}
  server.isDown = false
  server.requests = []
  vi.stubGlobal('fetch', async (url: string, init: RequestInit) => {
    if (server.isDown) throw new TypeError('no network')
    const body = init.body ? JSON.parse(String(init.body)) : {}
    server.requests.push({ method: init.method ?? 'GET', url, body })
    return new Response(JSON.stringify(answer(init.method ?? 'GET', url, body)), { status: 200 })
  })
})
afterEach(() => {
  cleanup()
  kept.clear()
  vi.unstubAllGlobals()
  vi.useRealTimers()
})

const words = (span: Span) => {
  const place = span.endSec > span.startSec ? `bars ${span.startSec} to ${span.endSec}` : `bar ${span.startSec}`
  return { place, where: null, over: null, full: `${place} · over Gm7` }
}

interface Options {
  selection?: Span | null
  onListen?: (comment: Comment) => void
}

function Panel({ takeId, selection = null, onListen = () => {} }: Options & { takeId: string }) {
  const comments = useTakeComments(takeId, me)
  return (
    <CommentsPanel
      comments={comments}
      letters={lettersOf(comments.comments)}
      canComment
      selection={selection}
      selectedId={null}
      placeOf={words}
      spanHere={() => ({ startSec: 19, endSec: 20 })}
      hereKey={19}
      nudged={(span, edge, steps) =>
        edge === 'start' ? { ...span, startSec: span.startSec + steps } : { ...span, endSec: span.endSec + steps }
      }
      focusCount={0}
      onListen={onListen}
      onSaid={() => {}}
    />
  )
}

/** A fresh take each time: what was sent for another one does not reach into this test. */
const open = async (comments: Comment[], options: Options = {}, takeId = freshId()) => {
  server.comments = comments.map((comment) => ({ ...comment, takeId }))
  const page = () => (
    <QueryClientProvider client={createQueryClient()}>
      <Toasts>
        <Panel takeId={takeId} {...options} />
      </Toasts>
    </QueryClientProvider>
  )
  const view = render(page())
  await waitFor(() => expect(document.querySelector('[aria-busy="false"]')).toBeTruthy())
  return {
    takeId,
    user: userEvent.setup(),
    reload: async () => {
      view.unmount()
      render(page())
      await waitFor(() => expect(document.querySelector('[aria-busy="false"]')).toBeTruthy())
    }
  }
}

const articles = () => screen.queryAllByRole('article')
const box = () => screen.getByPlaceholderText<HTMLTextAreaElement>('What do you hear?')

describe('the margin', () => {
  it('stands in the order of the bars, as a feed that says where in it one is', async () => {
    await open([
      buildComment({ text: 'second', startSec: 9, endSec: 10 }),
      buildComment({ text: 'first', startSec: 1, endSec: 2 })
    ])
    expect(articles().map((article) => article.getAttribute('aria-label'))).toEqual([
      expect.stringContaining('bars 1 to 2, question, by Mara Kessling'),
      expect.stringContaining('bars 9 to 10')
    ])
    expect(
      articles().map((article) => [article.getAttribute('aria-posinset'), article.getAttribute('aria-setsize')])
    ).toEqual([
      ['1', '2'],
      ['2', '2']
    ])
  })

  it('goes from note to note with the Page keys', async () => {
    const { user } = await open([buildComment({ startSec: 1 }), buildComment({ startSec: 3 })])
    articles()[0]?.focus()
    await user.keyboard('{PageDown}')
    expect(document.activeElement).toBe(articles()[1])
    await user.keyboard('{PageUp}')
    expect(document.activeElement).toBe(articles()[0])
  })

  it('goes there and loops it when the place is pressed', async () => {
    const onListen = vi.fn()
    const { user } = await open([buildComment({ text: 'here' })], { onListen })
    await user.click(screen.getByRole('button', { name: /bars 2 to 4/ }))
    expect(onListen).toHaveBeenCalledWith(expect.objectContaining({ text: 'here' }))
  })

  it('shows only what is open when asked to', async () => {
    const { user } = await open([
      buildComment({ text: 'open one' }),
      buildComment({ text: 'settled one', isOpen: false, settledBy: mara }),
      buildComment({ text: 'a good one', kind: 'good' })
    ])
    await user.click(screen.getByRole('button', { name: 'open 1' }))
    expect(articles()).toHaveLength(1)
    expect(screen.getByText('open one')).toBeTruthy()
  })

  it('offers settling for questions and things to fix only', async () => {
    const abilities = ['comment:settle', 'comment:reply']
    await open(
      (['question', 'to fix', 'good', 'observation'] as const).map((kind) =>
        buildComment({ kind, abilities, text: kind })
      )
    )
    const settles = (kind: string) =>
      within(articles().find((article) => within(article).queryByText(kind)) as HTMLElement).queryByRole('button', {
        name: 'Settle'
      }) !== null
    expect(['question', 'to fix', 'good', 'observation'].map(settles)).toEqual([true, true, false, false])
  })
})

describe('writing', () => {
  it('is about the selection, else about the bar the line is in', async () => {
    const first = await open([])
    expect(screen.getByLabelText('Write about bars 19 to 20')).toBeTruthy()
    cleanup()
    await open([], { selection: { startSec: 5, endSec: 8 } }, first.takeId)
    await waitFor(() => expect(screen.getByLabelText('Write about bars 5 to 8')).toBeTruthy())
  })

  it('shows the words at once, sends them once and clears the box', async () => {
    const { user } = await open([], { selection: { startSec: 5, endSec: 8 } })
    await user.selectOptions(screen.getByRole('combobox', { name: 'Kind of comment' }), 'to fix')
    await user.type(box(), 'Late here.')
    await user.click(screen.getByRole('button', { name: 'Say it' }))
    expect(screen.getByText('Late here.')).toBeTruthy()
    expect(box().value).toBe('')
    await waitFor(() => expect(server.comments).toHaveLength(1))
    expect(server.comments[0]).toMatchObject({ kind: 'to fix', text: 'Late here.', startSec: 5, endSec: 8 })
    await waitFor(() => expect(screen.queryByText('sending …')).toBeNull())
    expect(articles()).toHaveLength(1)
  })

  it('is about a moment or a stretch of time where there are no bars', () => {
    expect(['at 1:23.4', 'from 0:08.0 to 0:10.0', 'bar 19, beat 3'].map(aboutWords)).toEqual([
      '1:23.4',
      '0:08.0 to 0:10.0',
      'bar 19, beat 3'
    ])
  })

  it('says nothing when nothing is written', async () => {
    const { user } = await open([])
    await user.type(box(), '   {Control>}{Enter}{/Control}')
    expect(articles()).toHaveLength(0)
  })

  it('keeps what could not be sent over a reload and sends it exactly once', async () => {
    const { user, reload } = await open([])
    server.isDown = true
    await user.type(box(), 'From the train.{Control>}{Enter}{/Control}')
    expect(screen.getByText('sending …')).toBeTruthy()
    server.isDown = false
    await reload()
    await waitFor(() => expect(server.comments).toHaveLength(1), { timeout: 4000 })
    await waitFor(() => expect(screen.queryByText('sending …')).toBeNull(), { timeout: 4000 })
    expect(articles()).toHaveLength(1)
    expect(new Set(server.comments.map(({ id }) => id)).size).toBe(server.comments.length)
    expect(kept.size).toBe(0)
  })

  it('keeps a half-written comment, with the bar it was begun on, over a reload', async () => {
    const { user, reload } = await open([])
    await user.type(box(), 'Half a thou')
    await reload()
    await waitFor(() => expect(box().value).toBe('Half a thou'))
    expect(screen.getByLabelText('Write about bars 19 to 20')).toBeTruthy()
  })

  it('lets the person take back or send again what the server refused', async () => {
    const { user } = await open([])
    const taken = globalThis.fetch
    vi.stubGlobal('fetch', async (url: string, init: RequestInit) =>
      init.method === 'POST'
        ? new Response(
            JSON.stringify({ type: '/problems/forbidden', title: 'You may not do that here', status: 403 }),
            { status: 403 }
          )
        : taken(url, init)
    )
    await user.type(box(), 'Anyone?{Control>}{Enter}{/Control}')
    expect((await screen.findByRole('alert')).textContent).toContain('You may not do that here')
    expect(screen.getByText('Anyone?')).toBeTruthy()
    vi.stubGlobal('fetch', taken)
    await user.click(screen.getByRole('button', { name: 'Try again' }))
    await waitFor(() => expect(server.comments).toHaveLength(1))
    expect(screen.queryByRole('alert')).toBeNull()
  })
})

describe('a comment', () => {
  const own = () =>
    buildComment({
      text: 'Mine',
      author: me,
      abilities: ['comment:edit', 'comment:delete', 'comment:reply', 'comment:settle']
    })
  const choose = async (user: ReturnType<typeof userEvent.setup>, item: string) => {
    await user.click(screen.getByRole('button', { name: /^More for comment/ }))
    await user.click(screen.getByText(item))
  }

  it('is settled and opened again', async () => {
    const { user } = await open([own()])
    await user.click(screen.getByRole('button', { name: 'Settle' }))
    expect(screen.getByText(/settled by Inés/)).toBeTruthy()
    await waitFor(() => expect(server.comments[0]?.isOpen).toBe(false))
    await user.click(screen.getByRole('button', { name: 'Open again' }))
    await waitFor(() => expect(server.comments[0]?.isOpen).toBe(true))
  })

  it('is answered, and a half-written answer is kept', async () => {
    const { user, reload } = await open([own()])
    await user.click(screen.getByRole('button', { name: 'Answer' }))
    await user.type(screen.getByPlaceholderText('Your answer'), 'I meant')
    await reload()
    await user.click(screen.getByRole('button', { name: 'Answer' }))
    const answerBox = screen.getByPlaceholderText<HTMLTextAreaElement>('Your answer')
    await waitFor(() => expect(answerBox.value).toBe('I meant'))
    await user.type(answerBox, ' it.{Control>}{Enter}{/Control}')
    expect(within(screen.getByRole('list', { name: 'Answers' })).getByText('I meant it.')).toBeTruthy()
    await waitFor(() => expect(server.comments[0]?.replies).toHaveLength(1))
    expect(screen.getAllByText('I meant it.')).toHaveLength(1)
  })

  it('has its words and kind changed', async () => {
    const { user } = await open([own()])
    await choose(user, 'Change the words')
    const field = screen.getByLabelText('Your words')
    await user.clear(field)
    await user.type(field, 'Better words')
    await user.click(screen.getByRole('button', { name: 'Keep it' }))
    expect(screen.getByText('Better words')).toBeTruthy()
    await waitFor(() => expect(server.comments[0]?.text).toBe('Better words'))
  })

  it('is moved by a beat with buttons', async () => {
    const { user } = await open([own()])
    await choose(user, 'Move it')
    await user.click(screen.getByRole('button', { name: 'Start a beat earlier' }))
    await user.click(screen.getByRole('button', { name: 'End a beat later' }))
    expect(screen.getByRole('button', { name: /bars 1 to 5/ })).toBeTruthy()
    await waitFor(() => expect(server.comments[0]).toMatchObject({ startSec: 1, endSec: 5 }))
  })

  it('goes when deleted, comes back with Undo, and is never deleted on the server then', async () => {
    const { user } = await open([own()])
    await choose(user, 'Delete')
    expect(articles()).toHaveLength(0)
    await user.click(screen.getByRole('button', { name: 'Undo' }))
    expect(articles()).toHaveLength(1)
    expect(server.requests.filter(({ method }) => method === 'DELETE')).toEqual([])
  })

  it('is deleted on the server when nobody took that back', async () => {
    await open([own()])
    vi.useFakeTimers({ toFake: ['Date', 'setTimeout', 'clearTimeout'] })
    fireEvent.click(screen.getByRole('button', { name: /^More for comment/ }))
    fireEvent.click(screen.getByText('Delete'))
    await act(() => vi.advanceTimersByTimeAsync(11_000))
    expect(server.comments).toEqual([])
  })

  it('has no menu for those who may change nothing', async () => {
    await open([buildComment({ abilities: [] })])
    expect(screen.queryByRole('button', { name: /^More for comment/ })).toBeNull()
    expect(screen.queryByRole('button', { name: 'Answer' })).toBeNull()
  })
})
