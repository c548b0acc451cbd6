import { cleanup, render } from '@testing-library/react'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createScope, liveScopes, useScope } from '@client/lib/scope'

beforeEach(() => void vi.useFakeTimers())
afterEach(() => {
  cleanup()
  vi.useRealTimers()
})

describe('createScope', () => {
  it('ends listeners, timers, intervals, frames and observers together', () => {
    const scope = createScope()
    const calls: string[] = []
    const observer = { observe: vi.fn(), disconnect: vi.fn() }
    scope.listen(window, 'resize', () => void calls.push('resize'))
    scope.timeout(() => void calls.push('timeout'), 50)
    scope.interval(() => void calls.push('interval'), 50)
    scope.frame(() => void calls.push('frame'))
    scope.eachFrame(() => void calls.push('each frame'))
    scope.observe(observer, document.body)
    scope.dispose()
    window.dispatchEvent(new Event('resize'))
    vi.advanceTimersByTime(500)
    expect(calls).toEqual([])
    expect(observer.disconnect).toHaveBeenCalledOnce()
    expect(scope.signal.aborted).toBe(true)
    expect(vi.getTimerCount()).toBe(0)
  })

  it('delivers while it lives, and stops a single thing by its own ending', () => {
    const scope = createScope()
    const heard = vi.fn()
    const ticked = vi.fn()
    const stop = scope.listen(window, 'resize', heard)
    scope.interval(ticked, 10)
    window.dispatchEvent(new Event('resize'))
    stop()
    window.dispatchEvent(new Event('resize'))
    vi.advanceTimersByTime(35)
    expect(heard).toHaveBeenCalledOnce()
    expect(ticked).toHaveBeenCalledTimes(3)
    scope.dispose()
  })

  it('keeps asking for frames until ended from inside one', () => {
    const scope = createScope()
    let frames = 0
    scope.eachFrame(() => {
      frames += 1
      if (frames === 3) scope.dispose()
    })
    vi.advanceTimersByTime(1000)
    expect(frames).toBe(3)
  })

  it('runs endings last first, each once, and the rest even when one throws', () => {
    const scope = createScope()
    const order: number[] = []
    scope.add(() => void order.push(1))
    scope.add(() => {
      throw new Error('broken ending')
    })
    scope.add(() => void order.push(3))
    expect(() => scope.dispose()).toThrow('broken ending')
    scope.dispose()
    expect(order).toEqual([3, 1])
  })

  it('ends at once what is added too late', () => {
    const scope = createScope()
    scope.dispose()
    const late = vi.fn()
    scope.add(late)
    scope.timeout(late, 1)
    vi.advanceTimersByTime(10)
    expect(late).toHaveBeenCalledOnce()
  })

  it('ends children with itself, and counts what is alive', () => {
    const before = liveScopes()
    const scope = createScope()
    const child = scope.child()
    const early = scope.child()
    expect(liveScopes()).toBe(before + 3)
    early.dispose()
    expect(liveScopes()).toBe(before + 2)
    scope.dispose()
    expect(child.disposed).toBe(true)
    expect(liveScopes()).toBe(before)
  })
})

describe('useScope', () => {
  function Listening({ to }: { to: 'resize' | 'scroll' }) {
    useScope((scope) => void scope.listen(window, to, () => undefined), [to])
    return null
  }

  it('leaves nothing alive after 50 mounts, changes and unmounts', () => {
    const before = liveScopes()
    for (let turn = 0; turn < 50; turn += 1) {
      const { rerender, unmount } = render(<Listening to="resize" />)
      expect(liveScopes()).toBe(before + 1)
      rerender(<Listening to="scroll" />)
      expect(liveScopes()).toBe(before + 1)
      unmount()
    }
    expect(liveScopes()).toBe(before)
  })
})
