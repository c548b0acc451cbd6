import { beforeEach, describe, expect, it } from 'vitest'
import type { PreferenceChange, Preferences } from '@shared/practice/preferences'
import { createPreferenceChanges } from '@client/features/practice/preference-changes'

/** A server that answers when told, and a clock that moves when told. */
const stage = () => {
  let shown: Preferences | null = { volume: 0.7 }
  let timer: (() => void) | null = null
  let answer: { done(kept: Preferences): void; fail(error: unknown): void } | null = null
  const sent: PreferenceChange[] = []
  let reloads = 0
  const changes = createPreferenceChanges({
    send: (change) =>
      new Promise((done, fail) => {
        sent.push(change)
        answer = { done, fail }
      }),
    show: (update) => void (shown = update(shown)),
    isPassing: (error) => error === 'passing',
    reload: () => void (reloads += 1),
    later: (run) => {
      timer = run
      return () => void (timer = null)
    }
  })
  const settle = async (how: (given: NonNullable<typeof answer>) => void) => {
    if (!answer) throw new Error('nothing was asked')
    how(answer)
    await Promise.resolve()
    await Promise.resolve()
  }
  return { changes, sent, settle, tick: () => timer?.(), shown: () => shown, reloads: () => reloads }
}

describe('preference changes', () => {
  let on: ReturnType<typeof stage>
  beforeEach(() => {
    on = stage()
  })

  it('show at once and are sent together', () => {
    for (const volume of [0.6, 0.5, 0.4]) on.changes.change({ volume })
    on.changes.change({ countIn: 'one bar' })
    expect([on.shown(), on.sent]).toEqual([{ volume: 0.4, countIn: 'one bar' }, []])
    on.tick()
    expect(on.sent).toEqual([{ volume: 0.4, countIn: 'one bar' }])
  })

  it('keep what was changed while an answer was on its way, and send it after', async () => {
    on.changes.change({ volume: 0.6 })
    on.tick()
    on.changes.change({ volume: 0.3 })
    on.tick()
    expect(on.sent).toHaveLength(1)
    await on.settle(({ done }) => done({ volume: 0.6, countIn: 'two bars' }))
    expect(on.shown()).toEqual({ volume: 0.3, countIn: 'two bars' })
    on.tick()
    expect(on.sent[1]).toEqual({ volume: 0.3 })
  })

  it('are sent again after trouble on the way, with what is newer on top', async () => {
    on.changes.change({ volume: 0.6, areKeysOff: true })
    on.tick()
    on.changes.change({ volume: 0.2 })
    await on.settle(({ fail }) => fail('passing'))
    on.tick()
    expect(on.sent[1]).toEqual({ volume: 0.2, areKeysOff: true })
    expect(on.reloads()).toBe(0)
  })

  it('are given up when refused, and what is true is asked for', async () => {
    on.changes.change({ volume: 0.6 })
    on.tick()
    await on.settle(({ fail }) => fail('refused'))
    on.tick()
    expect([on.sent.length, on.reloads()]).toEqual([1, 1])
  })

  it('are dropped when somebody else signs in: neither sent nor shown', async () => {
    on.changes.change({ volume: 0.6 })
    on.tick()
    on.changes.change({ countIn: 'one bar' })
    on.changes.drop()
    const before = on.shown()
    await on.settle(({ done }) => done({ volume: 0.6 }))
    on.tick()
    expect([on.sent.length, on.shown()]).toEqual([1, before])
  })
})
