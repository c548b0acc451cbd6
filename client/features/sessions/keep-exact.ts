// Together by appointment: with an engine that acts at a moment of its own clock, everything of the shared transport is
// asked for at the moment it takes effect. Only what two clocks drift apart is bent, and hardly ever.
import type { Player } from '@client/transport/player'
import { totalSemitones } from '@shared/audio/listening'
import { sessionPosition, type SharedPlayback } from '@shared/timing/session-position'
import type { Sec } from '@shared/units'
import { gapSec } from './gap'

/** Farther off is mended by a jump. */
const jumpBeyondSec = 0.1
/**
 * At full speed and pitch samples pass as they are: bending the speed would change the sound more, and cost more work,
 * than leaving out or repeating so little. Seen twice, so that no single reading makes it jump.
 */
const plainJumpBeyondSec = 0.02
/** Stretched anyway, it is bent beyond the first until it is nearer than the second. */
const bendBeyondSec = 0.015
const bendUntilSec = 0.004
/** Of the speed: too little to be heard as another one. */
const maxBend = 0.01
const closeInSec = 2
/** Nearer than this a change needs no jump to be in its place. */
const sameSec = 0.012
/** An engine needs to be asked so long before, ms. */
const noticeMs = 120
/** After a change its place is believed once it is heard, ms. */
const settleMs = 400

interface Deps {
  player: Player
  /** Server time now, ms; null until the clock is known. */
  serverNow(): number | null
  localNow(): number
  onBlocked(): void
}

const sameLoop = (player: Player, { loop }: SharedPlayback): boolean => {
  const mine = player.loop?.span ?? null
  if (mine === null || loop === null) return mine === loop
  return Math.abs(mine.startSec - loop.startSec) < 1e-6 && Math.abs(mine.endSec - loop.endSec) < 1e-6
}

export const createKeepExact = ({ player, serverNow, localNow, onBlocked }: Deps) => {
  /** Until then (local ms) nothing is judged. */
  let settledAt = 0
  let isBending = false
  let wasApart = false

  const isPlain = (): boolean => player.rate === 1 && totalSemitones(player.semitones, player.aids) === 0
  const settleUntil = (serverMs: number, now: number): void => {
    settledAt = localNow() + Math.max(0, serverMs - now) + settleMs
    if (isBending) player.setTrim(1)
    isBending = wasApart = false
  }
  /** The engine's moment for a moment of the server. */
  const clockAt = (serverMs: number, now: number): Sec => player.clock() + (serverMs - now) / 1000

  const startAt = (shared: SharedPlayback, serverMs: number, now: number): void => {
    const at = clockAt(serverMs, now)
    const askedMs = localNow()
    player.seek(sessionPosition(shared, serverMs).positionSec, at)
    void player.play(at).then((isOut) => {
      if (!isOut) return onBlocked()
      // A device that had to be woken has let its appointment pass: it is judged as soon as it is heard.
      if (localNow() - askedMs > noticeMs / 2) settledAt = localNow() + noticeMs
    })
  }

  return {
    /** A new state of the shared transport, in force from its moment on or, when that is over, as soon as can be. */
    apply: (shared: SharedPlayback): void => {
      const now = serverNow()
      if (now === null) return
      if (!shared.playing) {
        player.pause()
        player.setRate(shared.rate)
        if (!sameLoop(player, shared)) player.setLoop(shared.loop ? { span: shared.loop } : null)
        if (Math.abs(player.heardPosition - shared.positionSec) > 0.005) player.seek(shared.positionSec)
        return settleUntil(now, now)
      }
      const serverMs = Math.max(shared.atServerMs, now + noticeMs)
      const at = clockAt(serverMs, now)
      const wanted = sessionPosition(shared, serverMs).positionSec
      const expected = player.positionAt(at)
      player.setRate(shared.rate, at)
      const isNewLoop = !sameLoop(player, shared)
      if (isNewLoop) player.setLoop(shared.loop ? { span: shared.loop } : null, at)
      if (player.state === 'playing') {
        const isOutside = shared.loop !== null && (wanted < shared.loop.startSec || wanted >= shared.loop.endSec)
        const isApart = Math.abs(gapSec(expected, wanted, shared.loop)) > sameSec
        if (isApart || (isNewLoop && isOutside)) player.seek(wanted, at)
      } else startAt(shared, serverMs, now)
      settleUntil(serverMs, now)
    },
    /** Now and then: starts what has become ready, mends what has drifted. */
    follow: (shared: SharedPlayback): void => {
      const now = serverNow()
      if (now === null || localNow() < settledAt) return
      const wanted = sessionPosition(shared, now)
      if (!wanted.playing) {
        if (player.state === 'playing') player.pause()
        return
      }
      if (player.state === 'ready') {
        startAt(shared, Math.max(shared.atServerMs, now + noticeMs), now)
        return settleUntil(Math.max(shared.atServerMs, now + noticeMs), now)
      }
      if (player.state !== 'playing' || now < shared.atServerMs) return
      const gap = gapSec(player.heardPosition, wanted.positionSec, shared.loop)
      const isApart = Math.abs(gap) > (isPlain() ? plainJumpBeyondSec : jumpBeyondSec)
      if (isApart && wasApart) {
        const serverMs = now + noticeMs
        player.seek(sessionPosition(shared, serverMs).positionSec, clockAt(serverMs, now))
        return settleUntil(serverMs, now)
      }
      wasApart = isApart
      isBending = !isPlain() && Math.abs(gap) > (isBending ? bendUntilSec : bendBeyondSec)
      const bend = Math.max(-maxBend, Math.min(maxBend, gap / closeInSec / shared.rate))
      player.setTrim(isBending ? 1 + bend : 1)
    }
  }
}
