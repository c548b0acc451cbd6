import { describe, expect, it } from 'vitest'
import { gapSec } from '@client/features/sessions/gap'
import { createKeepTogether, goodEnoughSec } from '@client/features/sessions/keep-together'
import type { Player, PlayerLoop } from '@client/transport/player'
import type { SharedPlayback } from '@shared/timing/session-position'

/** A player like a media element: starts and jumps late, runs at rate x trim. Time is ours. */
const simulate = (startLagMs: number) => {
  let now = 0
  let clockError = 0
  const timers: { at: number; work: () => void }[] = []
  let position = 0
  let soundsFrom: number | null = null
  let rate = 1
  let trim = 1
  let loop: PlayerLoop | null = null
  let jumps = 0
  let state: Player['state'] = 'ready'
  const step = (): void => {
    now += 1
    if (soundsFrom !== null && now >= soundsFrom) position += 0.001 * rate * trim
    if (loop && position >= loop.span.endSec) {
      position = loop.span.startSec
      soundsFrom = now + startLagMs
    }
    for (const timer of timers.splice(0)) {
      if (timer.at <= now) timer.work()
      else timers.push(timer)
    }
  }
  const player = {
    capabilities: { schedule: false },
    get state() {
      return state
    },
    get heardPosition() {
      return position
    },
    get loop() {
      return loop
    },
    play: async () => {
      state = 'playing'
      soundsFrom = now + startLagMs
      return true
    },
    pause: () => {
      state = 'ready'
      soundsFrom = null
    },
    seek: (sec: number) => {
      jumps += 1
      position = sec
      if (soundsFrom !== null) soundsFrom = now + startLagMs
    },
    setRate: (next: number) => {
      rate = next
    },
    setTrim: (next: number) => {
      trim = next
    },
    setLoop: (next: PlayerLoop | null) => {
      loop = next
    }
  } as unknown as Player
  const together = createKeepTogether({
    player,
    serverNow: () => now + clockError,
    localNow: () => now,
    timeout: (work, ms) => {
      const timer = { at: now + ms, work }
      timers.push(timer)
      return () => {
        const at = timers.indexOf(timer)
        if (at >= 0) timers.splice(at, 1)
      }
    },
    onBlocked: () => undefined
  })
  const run = async (ms: number): Promise<void> => {
    for (let i = 0; i < ms; i += 1) {
      step()
      if (i % 50 === 0) await Promise.resolve()
    }
  }
  return { together, run, player, now: () => now, jumps: () => jumps, setClockError: (ms: number) => (clockError = ms) }
}

const playing = (over: Partial<SharedPlayback> = {}): SharedPlayback => ({
  positionSec: 10,
  rate: 1,
  playing: true,
  loop: null,
  atServerMs: 0,
  durationSec: 600,
  ...over
})

describe('gapSec', () => {
  it('goes the short way round a loop', () => {
    expect(gapSec(19.95, 10.05, { startSec: 10, endSec: 20 })).toBeCloseTo(0.1)
    expect(gapSec(10.05, 19.95, { startSec: 10, endSec: 20 })).toBeCloseTo(-0.1)
  })
  it('is straight outside a loop', () => {
    expect(gapSec(30, 12, { startSec: 10, endSec: 20 })).toBe(-18)
  })
})

describe('keeping together', () => {
  for (const lag of [10, 60, 140]) {
    for (const rate of [0.5, 1, 1.5]) {
      it(`brings a player that starts ${lag} ms late to the shared place at ${rate} speed`, async () => {
        const { together, run } = simulate(lag)
        together.apply(playing({ rate, atServerMs: 120 }))
        await run(4000)
        expect(Math.abs(together.gap() ?? 9)).toBeLessThan(2 * goodEnoughSec)
      })
    }
  }

  it('bends instead of jumping when it joins again a little off', async () => {
    const { together, run, jumps, setClockError } = simulate(20)
    together.apply(playing())
    await run(4000)
    const before = jumps()
    setClockError(60)
    await run(4000)
    expect(jumps()).toBe(before)
    expect(Math.abs(together.gap() ?? 9)).toBeLessThan(2 * goodEnoughSec)
  })

  it('comes in at the place where the others are when it joins late', async () => {
    const { together, run, player, now } = simulate(50)
    await run(7000)
    together.apply(playing())
    await run(3000)
    expect(player.heardPosition).toBeCloseTo(10 + now() / 1000, 1)
  })

  it('stays within a tenth of a second through a loop that turns late', async () => {
    const { together, run } = simulate(60)
    together.apply(playing({ loop: { startSec: 10, endSec: 14 } }))
    await run(3000)
    let worst = 0
    for (let i = 0; i < 40; i += 1) {
      await run(250)
      worst = Math.max(worst, Math.abs(together.gap() ?? 9))
    }
    expect(worst).toBeLessThan(0.1)
  })

  it('goes on knowing the shared place while stepped away, and comes back to it', async () => {
    const { together, run, player } = simulate(30)
    together.apply(playing())
    await run(2000)
    together.letGo()
    player.pause()
    player.seek(200)
    await run(3000)
    expect(together.wantedSec()).toBeCloseTo(15, 1)
    expect(player.heardPosition).toBe(200)
    together.follow(playing())
    await run(2500)
    expect(Math.abs(together.gap() ?? 9)).toBeLessThan(0.05)
  })

  it('stops where the leader stopped', async () => {
    const { together, run, player } = simulate(30)
    together.apply(playing())
    await run(1000)
    together.apply(playing({ playing: false, positionSec: 42.5 }))
    await run(500)
    expect(player.heardPosition).toBe(42.5)
    expect(player.state).toBe('ready')
  })
})
