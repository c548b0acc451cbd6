import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createMediaElementPlayer } from '@client/transport/media-element-engine'
import { retryDelaysMs } from '@client/transport/media-faults'
import type { Player, PlayerEvents } from '@client/transport/player'
import { liveScopes } from '@client/lib/scope'
import { FakeAudio } from './fake-audio'

let audio: FakeAudio
let player: Player
let nowSec: number

const note = <E extends keyof PlayerEvents>(event: E) => {
  const list: PlayerEvents[E][] = []
  player.on(event, (payload) => list.push(payload))

  return list
}
const pass = (sec: number, step = 0.02) => {
  for (let done = 0; done < sec - 1e-9; done += step) {
    nowSec += step
    audio.run(step)
    vi.advanceTimersByTime(step * 1000)
  }
}
const loaded = async (durationSec = 100) => {
  audio.found = durationSec
  const loading = player.load({ url: '/take.m4a', durationSec })
  audio.arrive()
  await loading
}

beforeEach(() => {
  vi.useFakeTimers()
  nowSec = 1000
  audio = new FakeAudio()
  player = createMediaElementPlayer({
    makeElement: () => audio as unknown as HTMLAudioElement,
    makeContext: () => null,
    now: () => nowSec
  })
})
afterEach(() => {
  player.dispose()
  vi.useRealTimers()
})

describe('loading', () => {
  it('goes from empty through loading to ready', async () => {
    const states = note('state')
    expect(player.state).toBe('empty')
    await loaded()
    expect(states).toEqual(['loading', 'ready'])
    expect(player.durationSec).toBe(100)
  })

  it('keeps the speed through a load, which resets a media element', async () => {
    player.setRate(0.5)
    await loaded()
    expect(audio.playbackRate).toBe(0.5)
    expect(audio.preservesPitch).toBe(true)
  })

  it('plays when the sound arrives if play was pressed before', async () => {
    const loading = player.load({ url: '/take.m4a', durationSec: 100 })
    await player.play()
    audio.arrive()
    await loading
    expect(player.state).toBe('playing')
  })

  it('lands where somebody sought before the sound was there', async () => {
    const loading = player.load({ url: '/take.m4a', durationSec: 100 })
    player.seek(42)
    expect(player.heardPosition).toBe(42)
    audio.arrive()
    await loading
    expect(audio.currentTime).toBe(42)
  })
})

describe('speed and pitch', () => {
  it('keeps to 20 to 150 %', async () => {
    const rates = note('rate')
    player.setRate(3)
    player.setRate(0.01)
    player.setRate(NaN)
    expect(rates.map(({ rate }) => rate)).toEqual([1.5, 0.2, 1])
  })

  it('says that it cannot shift pitch, and does not', () => {
    player.setPitch(12)
    expect(player.semitones).toBe(0)
    expect(player.capabilities).toEqual({ pitch: false, schedule: false, aids: false, clicks: false })
  })
})

describe('the position', () => {
  it('moves evenly between the steps of the element', async () => {
    await loaded()
    await player.play()
    pass(1)
    const before = player.heardPosition
    nowSec += 0.01
    expect(player.heardPosition - before).toBeCloseTo(0.01, 3)
  })

  it('is told ahead for the clock, at the speed that is on', async () => {
    await loaded()
    player.setRate(0.5)
    await player.play()
    pass(1)
    expect(player.positionAt(player.clock() + 2)).toBeCloseTo(player.heardPosition + 1, 2)
  })

  it('stands still while paused', async () => {
    await loaded()
    await player.play()
    pass(1)
    player.pause()
    const at = player.heardPosition
    nowSec += 5
    expect(player.heardPosition).toBe(at)
    expect(player.positionAt(player.clock() + 9)).toBe(at)
  })

  it('stays inside the take', async () => {
    await loaded()
    player.seek(1e6)
    expect(player.heardPosition).toBe(100)
    player.seek(-3)
    expect(player.heardPosition).toBe(0)
  })
})

describe('looping', () => {
  it('turns at the end, counts the turns, and says where it plays from', async () => {
    await loaded()
    const turns = note('turn')
    player.setLoop({ span: { startSec: 10, endSec: 12 } })
    expect(player.heardPosition).toBe(10)
    const jumps = note('jump')
    await player.play()
    pass(5)
    expect(turns.map(({ count }) => count)).toEqual([1, 2])
    expect(jumps).toEqual([{ positionSec: 10 }, { positionSec: 10 }])
    expect(player.heardPosition).toBeGreaterThanOrEqual(10)
    expect(player.heardPosition).toBeLessThan(12)
  })

  it('turns with timers alone, as in a hidden tab', async () => {
    vi.stubGlobal('requestAnimationFrame', () => 0)
    await loaded()
    const turns = note('turn')
    player.setLoop({ span: { startSec: 10, endSec: 11 } })
    await player.play()
    pass(1.2)
    expect(turns).toHaveLength(1)
    vi.unstubAllGlobals()
  })

  it('goes round at the very end of the take', async () => {
    await loaded(20)
    const turns = note('turn')
    player.setLoop({ span: { startSec: 19, endSec: 20 } })
    await player.play()
    pass(1.5, 0.3)
    expect(turns).toHaveLength(1)
    expect(player.state).toBe('playing')
  })

  it('jumps into a loop set somewhere else', async () => {
    await loaded()
    await player.play()
    pass(1)
    player.setLoop({ span: { startSec: 50, endSec: 60 } })
    expect(player.heardPosition).toBe(50)
  })

  it('lets a person listen on beyond the loop without being pulled back', async () => {
    await loaded()
    player.setLoop({ span: { startSec: 10, endSec: 12 } })
    await player.play()
    player.seek(30)
    const turns = note('turn')
    pass(2)
    expect(turns).toHaveLength(0)
    expect(player.heardPosition).toBeGreaterThan(31)
  })

  it('never makes a loop shorter than can be heard, nor outside the take', async () => {
    await loaded()
    player.setLoop({ span: { startSec: 99.99, endSec: 99.99 } })
    expect(player.loop?.span.startSec).toBeCloseTo(99.9)
    expect(player.loop?.span.endSec).toBe(100)
    player.setLoop({ span: { startSec: NaN, endSec: 3 } })
    expect(player.loop).toBeNull()
  })

  it('counts afresh for another loop and forgets it with another source', async () => {
    await loaded()
    player.setLoop({ span: { startSec: 10, endSec: 11 } })
    await player.play()
    pass(1.5)
    const turns = note('turn')
    player.setLoop({ span: { startSec: 20, endSec: 21 } })
    pass(1.5)
    expect(turns).toEqual([{ count: 1 }])
    await loaded()
    expect(player.loop).toBeNull()
  })
})

describe('when the browser wants a tap first', () => {
  it('says blocked, answers false and is not playing', async () => {
    await loaded()
    const blocked = note('blocked')
    audio.refuses = true
    expect(await player.play()).toBe(false)
    expect(blocked).toHaveLength(1)
    expect(player.state).toBe('ready')
    audio.refuses = false
    expect(await player.play()).toBe(true)
    expect(player.state).toBe('playing')
  })
})

describe('when something breaks', () => {
  it('says so in a sentence when the file is damaged, and does not try again', async () => {
    await loaded()
    const faults = note('fault')
    audio.break(3)
    expect(player.state).toBe('failed')
    expect(faults[0]?.message).toMatch(/damaged/)
    vi.advanceTimersByTime(120_000)
    expect(audio.loads).toBe(1)
  })

  it('resolves a load that fails, so that nobody waits for ever', async () => {
    const faults = note('fault')
    const loading = player.load({ url: '/gone.m4a', durationSec: 100 })
    audio.break(4)
    await loading
    expect(player.state).toBe('failed')
    expect(faults).toHaveLength(1)
  })

  it('comes back by itself after a lost connection, at the same place and speed, playing', async () => {
    await loaded()
    player.setRate(0.6)
    await player.play()
    pass(10)
    const at = player.heardPosition
    const faults = note('fault')
    audio.break(2)
    expect(player.state).toBe('loading')
    expect(player.heardPosition).toBeCloseTo(at, 1)
    vi.advanceTimersByTime(retryDelaysMs[0] ?? 0)
    audio.break(2)
    vi.advanceTimersByTime(retryDelaysMs[1] ?? 0)
    expect(faults).toHaveLength(1)
    audio.arrive()
    await vi.advanceTimersByTimeAsync(0)
    expect(player.state).toBe('playing')
    expect(audio.currentTime).toBeCloseTo(at, 1)
    expect(audio.playbackRate).toBe(0.6)
  })

  it('tries at once when the machine is online again', async () => {
    await loaded()
    audio.break(2)
    vi.advanceTimersByTime(retryDelaysMs[0] ?? 0)
    audio.break(2)
    const before = audio.loads
    window.dispatchEvent(new Event('online'))
    expect(audio.loads).toBe(before + 1)
  })

  it('gives up in the end, and starts again when play is pressed', async () => {
    await loaded()
    player.seek(33)
    audio.run(0)
    const faults = note('fault')
    for (const delay of [0, ...retryDelaysMs]) {
      vi.advanceTimersByTime(delay)
      audio.break(2)
    }
    expect(player.state).toBe('failed')
    expect(faults.at(-1)?.message).toMatch(/press play/)
    await player.play()
    audio.arrive()
    await vi.advanceTimersByTimeAsync(0)
    expect(player.state).toBe('playing')
    expect(audio.currentTime).toBeCloseTo(33)
  })
})

describe('volume', () => {
  it('starts moderate and stays between silence and full', () => {
    expect(player.volume).toBe(0.7)
    player.setVolume(7)
    expect(player.volume).toBe(1)
    player.setVolume(-1)
    expect(player.volume).toBe(0)
  })
})

describe('the end', () => {
  it('stops at the end of the take and plays from the start when pressed again', async () => {
    await loaded(3)
    await player.play()
    pass(4)
    expect(player.state).toBe('ready')
    await player.play()
    expect(player.heardPosition).toBeLessThan(0.1)
  })

  it('notices a pause from outside, such as a headset pulled out', async () => {
    await loaded()
    await player.play()
    audio.pause()
    expect(player.state).toBe('ready')
  })

  it('leaves no scope alive', () => {
    const before = liveScopes()
    const other = createMediaElementPlayer({
      makeElement: () => new FakeAudio() as unknown as HTMLAudioElement,
      makeContext: () => null
    })
    other.dispose()
    expect(liveScopes()).toBe(before)
  })
})
