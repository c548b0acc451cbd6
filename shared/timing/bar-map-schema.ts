// What of the bar map travels over the wire. Bounds of size only; whether a body can be reckoned with says validate-bar-map.ts.
import { z } from 'zod'
import { LOWER_FIGURES, MAX_UPPER } from '@shared/timing/meter'
import type { Anchor, BarMapBody, FormMark, Meter, MeterMark, Position, Rational } from '@shared/timing/types'
import {
  ANCHOR_SEC,
  MAX_ANCHORS,
  MAX_BAR,
  MAX_DENOMINATOR,
  MAX_MARKS,
  MAX_METERS
} from '@shared/timing/validate-bar-map'

const BarNumber = z.int().min(-MAX_BAR).max(MAX_BAR)
const AnchorSec = z.number().min(ANCHOR_SEC.min).max(ANCHOR_SEC.max)
const AnchorId = z.string().min(1).max(64)

export const RationalSchema: z.ZodType<Rational> = z.object({ n: z.int(), d: z.int().min(1).max(MAX_DENOMINATOR) })
export const PositionSchema: z.ZodType<Position> = z.object({ bar: BarNumber, beat: RationalSchema })
export const MeterSchema: z.ZodType<Meter> = z.object({
  upper: z.int().min(1).max(MAX_UPPER),
  lower: z.literal([...LOWER_FIGURES]),
  pulse: z.int().min(1).max(MAX_UPPER)
})
export const AnchorSchema: z.ZodType<Anchor> = z.object({ id: AnchorId, sec: AnchorSec, position: PositionSchema })
export const MeterMarkSchema: z.ZodType<MeterMark> = z.object({ bar: BarNumber, meter: MeterSchema })
export const FormMarkSchema: z.ZodType<FormMark> = z.object({
  bar: BarNumber,
  formBar: z.int().min(1).max(MAX_BAR).nullable(),
  newPass: z.boolean()
})
export const BarMapBodySchema: z.ZodType<BarMapBody> = z.object({
  anchors: z.array(AnchorSchema).max(MAX_ANCHORS),
  meters: z.array(MeterMarkSchema).max(MAX_METERS),
  marks: z.array(FormMarkSchema).max(MAX_MARKS)
})

// A shift of at most a thousand beats, by any subdivision that is played.
const ShiftSchema: z.ZodType<Rational> = z.object({
  n: z.int().min(-1_000_000).max(1_000_000),
  d: z.int().min(1).max(1680)
})

export const BarMapOperationSchema = z.discriminatedUnion('kind', [
  /** Fixes a place; an anchor of the same id is replaced. */
  z.object({ kind: z.literal('setAnchor'), anchor: AnchorSchema }),
  z.object({ kind: z.literal('moveAnchor'), id: AnchorId, sec: AnchorSec }),
  z.object({ kind: z.literal('removeAnchor'), id: AnchorId }),
  /** Instead of the anchors from `fromSec` to `toSec` (both included) come these, which lie between the same seconds. */
  z.object({
    kind: z.literal('replaceAnchors'),
    fromSec: AnchorSec,
    toSec: AnchorSec,
    anchors: z.array(AnchorSchema).max(MAX_ANCHORS)
  }),
  /** Every anchor counts so many beats of the lower figure more: by 1, what was beat 1 is beat 2. Meters and marks stay. */
  z.object({ kind: z.literal('shiftBeats'), beats: ShiftSchema }),
  /** Half as many felt beats in the same time; bar 1 stays. */
  z.object({ kind: z.literal('halve') }),
  /** Twice as many felt beats in the same time; bar 1 stays. */
  z.object({ kind: z.literal('double') }),
  /** The sound now at `position` is bar 1, beat 1; bars of meters and marks are counted anew with it. */
  z.object({ kind: z.literal('setBarOne'), position: PositionSchema }),
  /** From this bar to the next meter change; felt beats stay where they sound and are grouped into the new bars. */
  z.object({ kind: z.literal('setMeter'), bar: BarNumber, meter: MeterSchema }),
  z.object({ kind: z.literal('removeMeter'), bar: BarNumber }),
  z.object({ kind: z.literal('setMark'), mark: FormMarkSchema }),
  z.object({ kind: z.literal('removeMark'), bar: BarNumber }),
  /** A bar that was not counted: this bar and all after it count one more. */
  z.object({ kind: z.literal('insertBar'), bar: BarNumber }),
  /** A bar counted too much: its anchors go, all after it count one less. */
  z.object({ kind: z.literal('removeBar'), bar: BarNumber }),
  z.object({ kind: z.literal('setAll'), body: BarMapBodySchema })
])

export type BarMapOperation = z.infer<typeof BarMapOperationSchema>
