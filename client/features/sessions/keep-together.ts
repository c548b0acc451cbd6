// Brings one player to where the shared playhead is and keeps it there: by appointment where the engine can (keep-exact.ts),
// else by a jump when far off and a hardly audible trim when near.
import type { Player } from '@client/transport/player'
import { sessionPosition, type SharedPlayback } from '@shared/timing/session-position'
import type { Sec } from '@shared/units'
import { gapSec } from './gap'
import { createKeepExact } from './keep-exact'

/** Farther off than this is mended by a jump, take seconds at full speed. */
export const jumpBeyondSec = 0.18
/** Nearer than this is left alone: two clocks and a media element are no better. */
export const goodEnoughSec = 0.008
/** The most that speed is bent to catch up. */
export const maxTrim = 0.06
/** A gap is closed in about this time, seconds. */
const closeInSec = 0.8
/** After a jump or a start the element needs this long before its place can be believed, ms. */
const settleMs = 350
const lookEveryMs = 150

interface Deps {
  player: Player
  /** Server time now, ms; null until the clock is known. */
  serverNow(): number | null
  timeout(work: () => void, ms: number): () => void
  localNow(): number
  onBlocked(): void
}

export const createKeepTogether = ({ player, serverNow, timeout, localNow, onBlocked }: Deps) => {
  const exact = createKeepExact({ player, serverNow, localNow, onBlocked })
  /** The engine may change while a take is open, so it is asked every time. */
  const canSchedule = (): boolean => player.capabilities.schedule
  let shared: SharedPlayback | null = null
  let cancel = (): void => undefined
  /** Until then (local ms) the player is settling and nothing is judged. */
  let settledAt = 0
  /** How late this browser starts and jumps, learned: seconds of take at full speed. */
  let lagSec = 0.04
  let isJudgingLag = false
  /** False while stepped away: the shared place goes on, the player is one's own. */
  let isFollowing = true

  const wantedNow = (): { positionSec: Sec; playing: boolean } | null => {
    const now = serverNow()
    return shared && now !== null ? sessionPosition(shared, now) : null
  }
  const sameLoop = (): boolean => {
    const mine = player.loop?.span ?? null
    const theirs = shared?.loop ?? null
    return (
      mine === theirs ||
      (mine !== null &&
        theirs !== null &&
        Math.abs(mine.startSec - theirs.startSec) < 1e-6 &&
        Math.abs(mine.endSec - theirs.endSec) < 1e-6)
    )
  }
  const settle = (): void => {
    settledAt = localNow() + settleMs
    isJudgingLag = true
    player.setTrim(1)
  }
  const goTo = (positionSec: Sec): void => {
    if (!shared) return
    player.seek(positionSec + (shared.playing ? lagSec * shared.rate : 0))
    settle()
  }

  const start = (): void => {
    const wanted = wantedNow()
    if (!wanted?.playing) return
    goTo(wanted.positionSec)
    void player.play().then((isOut) => {
      if (!isOut) onBlocked()
      settle()
    })
  }

  const follow = (): void => {
    const now = serverNow()
    if (!shared || now === null) return
    const wanted = sessionPosition(shared, now)
    const isSounding = player.state === 'playing'
    if (!wanted.playing) {
      if (isSounding) player.pause()
      return
    }
    // The start lies a moment ahead, so that everybody can be ready for it.
    if (now < shared.atServerMs) return
    if (!isSounding) {
      if (player.state === 'ready') start()
      return
    }
    if (localNow() < settledAt) return
    const gap = gapSec(player.heardPosition, wanted.positionSec, shared.loop)
    if (isJudgingLag) {
      // What is left over after a start or jump is this browser's own lateness.
      if (Math.abs(gap) < 0.4) lagSec = Math.max(0, Math.min(0.3, lagSec + 0.5 * (gap / shared.rate)))
      isJudgingLag = false
    }
    if (Math.abs(gap) > jumpBeyondSec * Math.max(0.5, shared.rate)) return goTo(wanted.positionSec)
    const bend = Math.max(-maxTrim, Math.min(maxTrim, gap / closeInSec / shared.rate))
    player.setTrim(Math.abs(gap) < goodEnoughSec ? 1 : 1 + bend)
  }

  const tick = (): void => {
    cancel()
    if (shared && canSchedule()) exact.follow(shared)
    else follow()
    cancel = timeout(tick, lookEveryMs)
  }

  /** A new state of the shared transport. */
  const apply = (state: SharedPlayback): void => {
    const before = shared
    shared = state
    if (!isFollowing) return
    if (canSchedule()) {
      exact.apply(state)
      return tick()
    }
    player.setRate(state.rate)
    if (!sameLoop()) player.setLoop(state.loop ? { span: state.loop } : null)
    const now = serverNow()
    if (now === null) return
    if (!state.playing) {
      player.pause()
      if (Math.abs(player.heardPosition - state.positionSec) > 0.005) player.seek(state.positionSec)
      player.setTrim(1)
    } else if (before?.playing && player.state === 'playing') {
      // Playing on: only a real jump is made at once, the rest is bent into place.
      const wanted = sessionPosition(state, now)
      const gap = gapSec(player.heardPosition, wanted.positionSec, state.loop)
      if (Math.abs(gap) > jumpBeyondSec && now >= state.atServerMs) goTo(wanted.positionSec)
    } else if (now < state.atServerMs) {
      player.seek(state.positionSec)
      const early = Math.max(0, state.atServerMs - now - lagSec * 1000)
      cancel()
      cancel = timeout(() => {
        start()
        tick()
      }, early)
      return
    }
    tick()
  }

  return {
    apply,
    wantedSec: (): Sec | null => wantedNow()?.positionSec ?? null,
    /** How far the player is from the shared playhead right now, seconds; null while nothing is shared. */
    gap: (): Sec | null => {
      const wanted = wantedNow()
      return wanted ? gapSec(player.heardPosition, wanted.positionSec, shared?.loop ?? null) : null
    },
    turned: (): void => {
      // The element's loop comes round a little late every time, and needs a moment to be believed again.
      settledAt = Math.max(settledAt, localNow() + 120)
    },
    /** Lets go of the player and goes on knowing the shared place. */
    letGo: (): void => {
      isFollowing = false
      cancel()
      player.setTrim(1)
    },
    /** Takes the player back to the shared place. */
    follow: (state: SharedPlayback): void => {
      isFollowing = true
      apply(state)
    }
  }
}
export type KeepTogether = ReturnType<typeof createKeepTogether>
