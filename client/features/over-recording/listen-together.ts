// A try beside the take it was played over, each by its own player, set together by their clocks.
import { createScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { TryCut } from '@shared/practice/over-recording'
import type { Sec } from '@shared/units'

export interface Together {
  /** From this second of the try. False when the browser wants a tap first. */
  play(fromSec: Sec): Promise<boolean>
  pause(): void
  dispose(): void
}

/** Both players must be running before their clocks can be compared; the try joins this much later. */
const joinSec = 0.35
const startPatienceMs = 8000
const lookMs = 25

/** `take` has the take loaded and set to the try's rate, without loop and count-in; `own` the try. */
export const playTogether = (take: Player, own: Player, { placeSec, rate }: TryCut, volume: number): Together => {
  const scope = createScope()
  let run = scope.child()
  const pause = (): void => {
    run.dispose()
    take.pause()
    own.pause()
  }
  scope.add(own.on('state', (state) => state === 'ready' && take.pause()))

  const bothRun = (current: typeof run): Promise<boolean> =>
    new Promise((resolve) => {
      const end = (are: boolean): void => {
        current.dispose()
        resolve(are)
      }
      const stop = current.interval(() => {
        if (take.state !== 'playing' || own.state !== 'playing') return
        stop()
        resolve(true)
      }, lookMs)
      current.timeout(() => end(false), startPatienceMs)
      current.add(() => resolve(false))
    })

  return {
    play: async (fromSec) => {
      run.dispose()
      run = scope.child()
      const current = run
      // A try that begins before the take waits for it.
      const from = Math.max(fromSec, -placeSec / rate, 0)
      take.seek(placeSec + from * rate)
      own.seek(from)
      own.setVolume(0)
      const areOut = await Promise.all([take.play(), own.play()])
      if (areOut.includes(false) || !(await bothRun(current))) {
        pause()
        return false
      }
      const heardThen = take.positionAt(take.clock() + joinSec)
      own.seek((heardThen - placeSec) / rate, own.clock() + joinSec)
      current.timeout(() => own.setVolume(volume), joinSec * 1000)
      return true
    },
    pause,
    dispose: () => {
      pause()
      scope.dispose()
    }
  }
}
