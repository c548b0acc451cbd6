// How long a file in this browser plays, and whether the browser plays it at all.
import type { Scope } from '@client/lib/scope'
import type { Sec } from '@shared/units'

/** Seconds, or null where the browser cannot play it. Recorders leave the length out: a jump past the end finds it. */
export const measureDuration = (url: string, scope: Scope): Promise<Sec | null> =>
  new Promise((resolve) => {
    const own = scope.child()
    const audio = new Audio()
    const done = (sec: Sec | null): void => {
      own.dispose()
      audio.removeAttribute('src')
      audio.load()
      resolve(sec)
    }
    const look = (): void => {
      if (Number.isFinite(audio.duration)) done(audio.duration > 0 ? audio.duration : null)
    }
    own.listen(audio, 'loadedmetadata', () => {
      if (Number.isFinite(audio.duration)) look()
      else audio.currentTime = 1e9
    })
    own.listen(audio, 'durationchange', look)
    own.listen(audio, 'error', () => done(null))
    audio.preload = 'metadata'
    audio.src = url
  })
