import type { Span } from '@shared/timing/types'

/** What the bar does; in a session that shares the transport these go through the session instead of the player. */
export interface TransportCommands {
  playPause: () => void
  setRate: (rate: number) => void
  setLoop: (span: Span | null) => void
  /** A bar back or on; tenths of a second without bars. */
  nudge: (direction: 1 | -1) => void
  /** From two bars before where the line is, and sounding. */
  againBefore: () => void
}
