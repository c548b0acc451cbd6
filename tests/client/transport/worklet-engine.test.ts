import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { liveScopes } from '@client/lib/scope'
import { createPlayer } from '@client/transport/create-player'
import { PieceFault } from '@client/transport/engine/piece-fault'
import { createWorkletEngine, type WorkletEngine } from '@client/transport/engine/worklet-engine'
import { createMediaElementPlayer } from '@client/transport/media-element-engine'
import type { Player, PlayerEvents } from '@client/transport/player'
import { FakeAudio } from './fake-audio'
import { createFakeGraph, createFakeStock, lateSec, type FakeGraph } from './fake-graph'

let graph: FakeGraph
let stock: ReturnType<typeof createFakeStock>
let engine: WorkletEngine
let unfit: string[]
let scopesBefore: number

const source = { url: '/take.m4a', piecesUrl: '/pieces', durationSec: 60 }
const note = <E extends keyof PlayerEvents>(event: E, player: Player = engine) => {
  const list: PlayerEvents[E][] = []
  player.on(event, (payload) => list.push(payload))
  return list
}

beforeEach(() => {
  scopesBefore = liveScopes()
  graph = createFakeGraph()
  stock = createFakeStock(60)
  unfit = []
  engine = createWorkletEngine({ openGraph: graph.open, openSound: stock.open, onUnfit: (why) => unfit.push(why) })
})
afterEach(() => {
  engine.dispose()
  expect(liveScopes()).toBe(scopesBefore)
})

describe('playing', () => {
  it('tells what is heard, not what is rendered', async () => {
    const states = note('state')
    await engine.load(source)
    await engine.play()
    graph.run(2)
    expect(states).toEqual(['loading', 'ready', 'playing'])
    expect(engine.heardPosition).toBeGreaterThan(2 - lateSec - 0.2)
    expect(engine.heardPosition).toBeLessThan(2 - lateSec)
    expect(engine.positionAt(engine.clock() + 1)).toBeCloseTo(engine.heardPosition + 1, 6)
  })

  it('is where it was sought at once, and goes on from there', async () => {
    await engine.load(source)
    await engine.play()
    graph.run(1)
    engine.seek(40)
    expect(engine.heardPosition).toBe(40)
    graph.run(1)
    expect(engine.heardPosition).toBeGreaterThan(40.7)
    expect(engine.heardPosition).toBeLessThan(41)
  })

  it('stands where it was heard when it is paused, and goes on from there', async () => {
    await engine.load(source)
    await engine.play()
    graph.run(1)
    const at = engine.heardPosition
    engine.pause()
    expect(engine.state).toBe('ready')
    expect(engine.heardPosition).toBe(at)
    graph.run(1)
    expect(engine.heardPosition).toBeCloseTo(at, 3)
  })

  it('starts, jumps and slows at the moments asked for', async () => {
    await engine.load(source)
    await engine.play()
    graph.run(0.5)
    const at = engine.clock() + 1
    engine.seek(30, at)
    engine.setRate(0.5, at + 1)
    expect(engine.heardPosition).toBeLessThan(1)
    graph.run(3)
    expect(engine.positionAt(at)).toBeCloseTo(30, 3)
    expect(engine.positionAt(at + 1)).toBeCloseTo(31, 3)
    expect(engine.positionAt(at + 1.5)).toBeCloseTo(31.25, 3)
  })

  it('tells every turn of a loop and the rates of its ladder', async () => {
    await engine.load(source)
    const [turns, rates] = [note('turn'), note('rate')]
    engine.setLoop({ span: { startSec: 10, endSec: 11 }, ladder: { from: 0.5, to: 1, step: 0.25, every: 1 } })
    expect(engine.heardPosition).toBe(10)
    await engine.play()
    graph.run(4)
    expect(turns.map(({ count }) => count)).toEqual([1, 2])
    expect(rates.map(({ rate }) => rate)).toEqual([0.5, 0.75, 1])
    expect(engine.rate).toBe(1)
  })

  it('counts in where a person starts, and not by appointment', async () => {
    await engine.load(source)
    const asked: number[] = []
    engine.setCountIn((startSec) => {
      asked.push(startSec)
      return { leadSec: 2, clicks: [{ atSec: -2, accent: 2 }] }
    })
    engine.seek(20)
    await engine.play()
    graph.run(1.5)
    expect(engine.heardPosition).toBe(20)
    graph.run(1.5)
    expect(engine.heardPosition).toBeGreaterThan(20.5)
    engine.pause()
    graph.run(0.5)
    await engine.play(engine.clock() + 0.1)
    expect(asked).toEqual([20])
  })

  it('ends at the end of the take and starts again from its beginning', async () => {
    await engine.load(source)
    engine.seek(59.5)
    await engine.play()
    graph.run(1)
    expect(engine.state).toBe('ready')
    expect(engine.heardPosition).toBe(60)
    await engine.play()
    graph.run(0.5)
    expect(engine.heardPosition).toBeGreaterThan(0)
    expect(engine.heardPosition).toBeLessThan(1)
  })
})

describe('waiting', () => {
  it('says that it loads while pieces are missing, and plays by itself when they come', async () => {
    stock.holdBack()
    await engine.load(source)
    const [states, faults] = [note('state'), note('fault')]
    await engine.play()
    graph.run(1)
    expect(engine.state).toBe('loading')
    stock.events()?.onTrouble(true)
    stock.events()?.onTrouble(true)
    expect(faults).toHaveLength(1)
    stock.deliver()
    graph.run(1)
    expect(states.at(-1)).toBe('playing')
    expect(engine.heardPosition).toBeGreaterThan(0.5)
  })

  it('starts when it is loaded if play was pressed before', async () => {
    const loading = engine.load(source)
    engine.seek(12)
    await engine.play()
    await loading
    graph.run(1)
    expect(engine.state).toBe('playing')
    expect(engine.heardPosition).toBeGreaterThan(12.5)
  })
})

describe('browsers', () => {
  it('tells when a tap is wanted', async () => {
    await engine.load(source)
    const blocked = note('blocked')
    graph.refuse(true)
    expect(await engine.play()).toBe(false)
    expect(blocked).toHaveLength(1)
    expect(engine.state).toBe('ready')
    graph.refuse(false)
    expect(await engine.play()).toBe(true)
  })

  it('stops where it is when the system takes the sound away', async () => {
    await engine.load(source)
    await engine.play()
    graph.run(1)
    graph.silence()
    expect(engine.state).toBe('ready')
    expect(engine.heardPosition).toBeGreaterThan(0.5)
  })

  it('goes on at the same place with a new graph when the old one breaks', async () => {
    await engine.load(source)
    engine.setRate(0.8)
    await engine.play()
    graph.run(2)
    const at = engine.heardPosition
    graph.breakDown()
    await new Promise((resolve) => setTimeout(resolve, 0))
    expect(graph.opened()).toBe(2)
    graph.run(1)
    expect(engine.state).toBe('playing')
    expect(engine.heardPosition - at).toBeGreaterThan(0.4)
    expect(engine.heardPosition - at).toBeLessThan(0.85)
  })
})

describe('the player', () => {
  const make = (open: typeof stock.open, missing: (string | null)[] = []) => {
    const audio = new FakeAudio()
    const player = createPlayer({
      hasWorklets: () => true,
      onMissing: (words) => missing.push(words),
      makeWorklet: (deps) => createWorkletEngine({ ...deps, openGraph: graph.open, openSound: open }),
      makeElement: () =>
        createMediaElementPlayer({
          makeElement: () => audio as unknown as HTMLAudioElement,
          makeContext: () => null
        })
    })
    return { player, audio, missing }
  }

  it('hands over to the element with everything as it is set where pieces cannot be decoded', async () => {
    const { player, audio, missing } = make(stock.open)
    await player.load(source)
    player.setRate(0.6)
    player.setVolume(0.3)
    player.seek(20)
    await player.play()
    graph.run(1)
    stock.events()?.onFault('This browser cannot decode it.')
    audio.found = 60
    audio.arrive()
    await new Promise((resolve) => setTimeout(resolve, 0))
    audio.run(0.1)
    expect(player.capabilities.schedule).toBe(false)
    expect(missing.at(-1)).toMatch(/cannot decode it.*late.*no pitch/)
    expect(player.rate).toBe(0.6)
    expect(player.volume).toBe(0.3)
    expect(player.heardPosition).toBeGreaterThan(20.3)
    expect(player.state).toBe('playing')
    player.dispose()
  })

  it('takes the element at once where worklets do not load', async () => {
    graph.goDown()
    const { player, audio, missing } = make(stock.open)
    const loading = player.load(source)
    await loading
    audio.arrive()
    await new Promise((resolve) => setTimeout(resolve, 0))
    expect(player.state).toBe('ready')
    expect(missing.at(-1)).toMatch(/worklets/)
    player.dispose()
  })

  it('tries our own engine again with the next source', async () => {
    let canDecode = false
    const { player, audio, missing } = make(async (...given) => {
      if (!canDecode) throw new PieceFault('Nothing here.', false)
      return stock.open(...given)
    })
    await player.load(source)
    audio.arrive()
    expect(player.capabilities.pitch).toBe(false)
    canDecode = true
    await player.load(source)
    expect(player.capabilities.pitch).toBe(true)
    expect(missing.at(-1)).toBeNull()
    player.dispose()
  })
})
