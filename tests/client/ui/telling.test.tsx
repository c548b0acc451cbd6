import { act, cleanup, fireEvent, render, screen } from '@testing-library/react'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createScope } from '@client/lib/scope'
import { LiveLog, useSay } from '@client/ui/live-log'
import { createLiveQueue } from '@client/ui/live-queue'
import { RelativeTime } from '@client/ui/relative-time'
import { Toasts, useToast } from '@client/ui/toasts'

beforeEach(() => void vi.useFakeTimers())
afterEach(() => {
  cleanup()
  vi.useRealTimers()
})

const pass = (ms: number) => act(() => vi.advanceTimersByTime(ms))

describe('createLiveQueue', () => {
  const setup = () => {
    const scope = createScope()
    const spoken: string[] = []
    return { scope, spoken, queue: createLiveQueue(scope, (text) => void spoken.push(text)) }
  }

  it('tells the first at once and at most one every 5 s after that (trust.md 4.1.3: <= 1 message / 5 s)', () => {
    const { scope, spoken, queue } = setup()
    const counts: number[] = []
    for (let at = 0; at < 60; at += 1) {
      queue.say(`message ${at}.`)
      vi.advanceTimersByTime(500)
      counts.push(spoken.length)
    }
    // 30 s: at 0, 5, 10, 15, 20, 25 and 30.
    expect(spoken).toHaveLength(7)
    for (let at = 10; at < counts.length; at += 1) {
      expect((counts[at] ?? 0) - (counts[at - 10] ?? 0)).toBeLessThanOrEqual(1)
    }
    scope.dispose()
  })

  it('tells the last three together and counts the others', () => {
    const { scope, spoken, queue } = setup()
    for (const word of ['a.', 'b.', 'c.', 'd.', 'e.', 'f.']) queue.say(word)
    vi.advanceTimersByTime(5000)
    expect(spoken).toEqual(['a.', '2 more before: d. e. f.'])
    scope.dispose()
  })

  it('speaks at once again after a silence, and not after its end', () => {
    const { scope, spoken, queue } = setup()
    queue.say('a.')
    vi.advanceTimersByTime(20_000)
    queue.say('b.')
    expect(spoken).toEqual(['a.', 'b.'])
    queue.say('c.')
    scope.dispose()
    vi.advanceTimersByTime(20_000)
    expect(spoken).toEqual(['a.', 'b.'])
  })
})

describe('LiveLog', () => {
  function Speaker() {
    const say = useSay()
    return <button onClick={() => say('Mara leads now.')}>say</button>
  }

  it('puts what is said into a polite log', () => {
    render(
      <LiveLog>
        <Speaker />
      </LiveLog>
    )
    fireEvent.click(screen.getByRole('button'))
    expect(screen.getByRole('log').getAttribute('aria-live')).toBe('polite')
    expect(screen.getByRole('log').textContent).toBe('Mara leads now.')
  })
})

describe('Toasts', () => {
  const undo = vi.fn()
  function Deleter() {
    const toast = useToast()
    return <button onClick={() => toast({ text: 'Comment deleted.', undo })}>delete</button>
  }
  const deleteOne = () => {
    undo.mockClear()
    render(
      <Toasts>
        <Deleter />
      </Toasts>
    )
    fireEvent.click(screen.getByRole('button', { name: 'delete' }))
  }

  it('offers the way back once and leaves when it is taken', () => {
    deleteOne()
    fireEvent.click(screen.getByRole('button', { name: 'Undo' }))
    expect(undo).toHaveBeenCalledOnce()
    expect(screen.queryByText('Comment deleted.')).toBeNull()
  })

  it('leaves by itself, but not while it has the focus', () => {
    deleteOne()
    fireEvent.focus(screen.getByRole('button', { name: 'Undo' }))
    pass(60_000)
    expect(screen.getByText('Comment deleted.')).toBeDefined()
    fireEvent.blur(screen.getByRole('button', { name: 'Undo' }))
    pass(10_000)
    expect(screen.queryByText('Comment deleted.')).toBeNull()
  })
})

describe('RelativeTime', () => {
  it('moves on with the clock and gives the exact time to focus', () => {
    vi.setSystemTime(new Date('2026-11-24T12:00:00'))
    render(<RelativeTime at={new Date('2026-11-24T11:58:00').toISOString()} />)
    const time = screen.getByText('2 minutes ago')
    pass(60_000)
    expect(time.textContent).toBe('3 minutes ago')
    fireEvent.focus(time)
    expect(screen.getByRole('tooltip').textContent).toMatch(/24 November 2026.*11:58/u)
    fireEvent.keyDown(time, { key: 'Escape' })
    expect(screen.queryByRole('tooltip')).toBeNull()
  })
})
