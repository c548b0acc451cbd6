// What a chart and its edits are made of on the wire. Shapes and lengths only: whether a bar can be read is for
// chart-document.ts to say, which can name the bar.
import { z } from 'zod'
import { MAX_BAR_TEXT } from '@shared/music/chart'
import { MAX_SECTION_NAME } from '@shared/music/chart-text'
import { MAX_KEY_TEXT } from '@shared/music/key'

export const chartLimits = {
  sections: 60,
  barsPerSection: 200,
  order: 200,
  barText: MAX_BAR_TEXT,
  /** Characters in all bars together: reading an unknown chord takes a third of a millisecond. */
  text: 6000,
  sectionName: MAX_SECTION_NAME,
  key: MAX_KEY_TEXT,
  meter: 8,
  /** Felt beats a minute. */
  tempoMin: 20,
  tempoMax: 400
} as const

const SectionId = z.string().min(1).max(64)
const SectionName = z.string().min(1).max(chartLimits.sectionName)
const BarText = z.string().max(chartLimits.barText)
const Bars = z.array(BarText).max(chartLimits.barsPerSection)
const BarNumber = z.number().int().min(0).max(chartLimits.barsPerSection)
const Beats = z.number().min(chartLimits.tempoMin).max(chartLimits.tempoMax)

const ChartSection = z.object({ id: SectionId, name: SectionName, bars: Bars })
const Key = z.string().max(chartLimits.key)
const MeterText = z.string().max(chartLimits.meter)
const Tempo = z.object({ min: Beats, max: Beats }).nullable()
const Order = z.array(SectionId).max(chartLimits.order)

export const chartBodySchema = z.object({
  key: Key,
  meter: MeterText,
  tempo: Tempo,
  cyclic: z.boolean(),
  sections: z.array(ChartSection).max(chartLimits.sections),
  order: Order
})

/** Places (`index`, `at`, `to`) count from 0. */
export const chartOperationSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('setKey'), key: Key }),
  z.object({ kind: z.literal('setMeter'), meter: MeterText }),
  z.object({ kind: z.literal('setTempo'), tempo: Tempo }),
  z.object({ kind: z.literal('setCyclic'), cyclic: z.boolean() }),
  z.object({ kind: z.literal('setBar'), sectionId: SectionId, index: BarNumber, text: BarText }),
  z.object({ kind: z.literal('insertBar'), sectionId: SectionId, index: BarNumber, text: BarText }),
  z.object({ kind: z.literal('removeBar'), sectionId: SectionId, index: BarNumber }),
  z.object({ kind: z.literal('setBars'), sectionId: SectionId, bars: Bars }),
  z.object({
    kind: z.literal('addSection'),
    section: ChartSection,
    at: z.number().int().min(0).max(chartLimits.sections)
  }),
  z.object({ kind: z.literal('renameSection'), sectionId: SectionId, name: SectionName }),
  z.object({ kind: z.literal('removeSection'), sectionId: SectionId }),
  z.object({
    kind: z.literal('moveSection'),
    sectionId: SectionId,
    to: z.number().int().min(0).max(chartLimits.sections)
  }),
  z.object({ kind: z.literal('setOrder'), order: Order }),
  z.object({ kind: z.literal('replaceChart'), body: chartBodySchema })
])
export type ChartOperation = z.infer<typeof chartOperationSchema>
