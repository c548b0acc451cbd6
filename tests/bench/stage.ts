// What the figures are got on: a database server, a built page, the real server and its bare peer, each opened when
// the first figure asks for it and gone at the end.
import { openTestRoom } from '../../server/setup/test-room.mjs'
import type { AppPlace, AppQuestion } from './app-process.ts'
import type { BareQuestion } from './bare-process.ts'
import { type Running, start } from './processes.ts'
import { longTake, type LongTake } from './sound.ts'

export const longMinutes = 60
const longBars = 2000
const longComments = 500

const once = <T>(make: () => Promise<T>): (() => Promise<T>) => {
  let made: Promise<T> | undefined
  return () => (made ??= make())
}

export interface Real extends AppPlace, Pick<Running, 'cpuMs'> {
  ask<T>(question: AppQuestion): Promise<T>
}
export interface Bare extends Pick<Running, 'cpuMs'> {
  url: string
  ask<T>(question: BareQuestion): Promise<T>
}
/** Processor time that both servers take from now on, ms. */
export const spending = async (real: Real, bare: Bare): Promise<() => Promise<{ ours: number; peer: number }>> => {
  const [ours, peer] = [await real.cpuMs(), await bare.cpuMs()]
  return async () => ({ ours: (await real.cpuMs()) - ours, peer: (await bare.cpuMs()) - peer })
}

export interface Stage {
  room(): Promise<{ folder: string }>
  real(): Promise<Real>
  bare(): Promise<Bare>
  /** An hour with 2000 bars and 500 comments. */
  longTake(): Promise<LongTake & { takeId: string; what: string }>
  close(): Promise<void>
}

export const createStage = (build: boolean): Stage => {
  const processes: Running[] = []
  let closeRoom = async (): Promise<void> => undefined
  const begin = (file: string, given: object): Running => {
    const running = start(file, given)
    processes.push(running)
    return running
  }
  const room = once(async () => {
    const opened = await openTestRoom({ build })
    closeRoom = opened.close
    Object.assign(process.env, opened.env)
    return opened
  })
  const real = once(async (): Promise<Real> => {
    const running = begin('app-process.ts', { storageDir: (await room()).folder })
    return { ...(await running.ask<AppPlace>({ ask: 'place' })), ask: running.ask, cpuMs: running.cpuMs }
  })
  const bare = once(async (): Promise<Bare> => {
    const running = begin('bare-process.ts', {})
    return { url: await running.ask<string>({ ask: 'place' }), ask: running.ask, cpuMs: running.cpuMs }
  })
  return {
    room,
    real,
    bare,
    longTake: once(async () => {
      const take = await longTake(longMinutes)
      const { ask } = await real()
      const takeId = await ask<string>({ ask: 'long take', take, bars: longBars, comments: longComments })
      const what = `take of ${longMinutes} minutes, ${longBars} bars, ${longComments} comments`
      return { ...take, takeId, what }
    }),
    close: async () => {
      for (const running of processes) await running.stop()
      await closeRoom()
    }
  }
}
