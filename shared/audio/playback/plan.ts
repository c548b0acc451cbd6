// From what was asked for to what sounds when: parts of the output, each exact to a fraction of a frame, ahead of time.
import type { Leg } from '../stretch/types.ts'
import { follow, obey, partLength } from './plan-steps.ts'
import type { PlanCommand, PlanPart } from './plan-types.ts'

interface Order {
  outFrame: number
  command: PlanCommand
}

/** Commands of one family replace each other: a pause pressed now does away with a start that was to come. */
const familyOf = ({ kind }: PlanCommand): string =>
  kind === 'play' || kind === 'pause' ? 'motion' : kind === 'starve' || kind === 'feed' ? 'stock' : kind

/** The part that an output frame lies in; the first part for frames before all of them. Parts are in order, one at least. */
export const partAt = (parts: readonly PlanPart[], outFrame: number): PlanPart => {
  let at = parts.length - 1
  while (at > 0 && (parts[at]?.outFrame ?? 0) > outFrame) at -= 1
  const part = parts[at]
  if (!part) throw new RangeError('a plan has one part at least')
  return part
}

/** Take frame that sounds at an output frame of a part; where nothing sounds, the frame it will go on from. */
export const placeIn = (part: PlanPart, outFrame: number): number => {
  if (part.mode === 'resting') return part.endFrame
  const elapsed = Math.max(0, outFrame - part.outFrame)
  return Math.min(part.sourceFrame + elapsed * part.speed, Math.max(part.endFrame, part.sourceFrame))
}

/** What the stretcher is told of a part; `shift` is the output frame at which its own count began. */
export const legOf = ({ outFrame, sourceFrame, endFrame, speed, settings, mode }: PlanPart, shift: number): Leg => ({
  outFrame: outFrame - shift,
  sourceFrame: mode === 'resting' ? endFrame : sourceFrame,
  speed,
  ratio: settings.ratio,
  ...(mode === 'playing' ? {} : { isSilent: true })
})

/**
 * A plan grows by itself (loops turn, rests end) and by commands, each with the frame at which it takes effect. A command
 * changes everything from its frame on and nothing before it; one given later for the same frame is obeyed later.
 * Nothing drifts: a loop's turn falls on a fraction of a frame, and the pass that follows starts by as much past its start.
 */
export const createPlan = (totalFrames: number, start: PlanPart) => {
  let parts: PlanPart[] = [start]
  let orders: Order[] = []
  /** Commands obeyed so far, of those that are kept. */
  let obeyed = 0
  /** Parts from this frame on have not been told to anybody yet. */
  let newFrom = start.outFrame

  const last = (): PlanPart => parts.at(-1) ?? start
  const push = (part: PlanPart): void => {
    // Of two things at one frame only what comes of both is left.
    const before = last()
    if (before.outFrame === part.outFrame) {
      parts.pop()
      const [fadeIn, fadeOut] = [Math.max(part.fadeIn, before.fadeIn), Math.max(part.fadeOut, before.fadeOut)]
      parts.push({ ...part, fadeIn, fadeOut, isJump: before.isJump || part.isJump })
    } else parts.push(part)
    newFrom = Math.min(newFrom, part.outFrame)
  }

  const extend = (untilFrame: number): void => {
    for (;;) {
      const part = last()
      const order = orders[obeyed]
      const ownFrame = part.outFrame + partLength(part)
      if (order && order.outFrame < ownFrame) {
        if (order.outFrame > untilFrame) return
        obeyed += 1
        push(obey(part, order.command, Math.max(order.outFrame, part.outFrame), totalFrames))
      } else {
        if (ownFrame > untilFrame) return
        push(follow(part, totalFrames))
      }
    }
  }

  return {
    /** A command from `outFrame` on. Commands of its family that were to come at that frame or later are dropped. */
    give: (command: PlanCommand, outFrame: number): void => {
      const family = familyOf(command)
      const kept = orders.filter((order) => order.outFrame < outFrame || familyOf(order.command) !== family)
      const place = kept.filter((order) => order.outFrame <= outFrame).length
      // Everything from the earliest frame that is touched is thought out anew.
      parts = parts.filter((part, index) => index === 0 || part.outFrame < outFrame)
      orders = [...kept.slice(0, place), { outFrame, command }, ...kept.slice(place)]
      obeyed = Math.min(
        obeyed,
        orders.findIndex((order) => order.outFrame >= outFrame)
      )
      newFrom = Math.min(newFrom, outFrame)
    },
    /** All parts that begin up to a frame. */
    until: (outFrame: number): readonly PlanPart[] => {
      extend(outFrame)
      return parts
    },
    /** Drops what lies before the part that a frame is in. */
    forget: (outFrame: number): void => {
      if ((parts[1]?.outFrame ?? Infinity) > outFrame) return
      parts = fromPartAt(parts, outFrame)
      const from = parts[0]?.outFrame ?? outFrame
      const kept = orders.filter((order, index) => index >= obeyed || order.outFrame > from)
      obeyed -= orders.length - kept.length
      orders = kept
    },
    /** Parts that are new since the last asking, and the frame from which they replace what was told before. */
    news: (): { fromFrame: number; parts: PlanPart[] } | null => {
      if (newFrom === Infinity) return null
      const fromFrame = newFrom
      newFrom = Infinity
      return { fromFrame, parts: parts.filter((part) => part.outFrame >= fromFrame) }
    }
  }
}
export type Plan = ReturnType<typeof createPlan>

/** Takes news of a plan into a copy of it: what is there from the frame on is replaced. */
export const mergeParts = (
  parts: readonly PlanPart[],
  news: { fromFrame: number; parts: readonly PlanPart[] },
  keepFrames: number
): PlanPart[] => {
  const merged = [...parts.filter((part) => part.outFrame < news.fromFrame), ...news.parts]
  const oldest = (news.parts[0]?.outFrame ?? news.fromFrame) - keepFrames
  return fromPartAt(merged, oldest)
}

/** Without what was over before a frame. */
const fromPartAt = (parts: PlanPart[], outFrame: number): PlanPart[] =>
  parts.filter((_, index) => (parts[index + 1]?.outFrame ?? Infinity) > outFrame)
