import { memo } from 'react'
import { Figures } from '@client/ui/figures'
import type { BarMap } from '@shared/timing/bar-map'
import type { BarIndex } from '@shared/units'
import type { BarMark } from './bar-marks'
import { scaleOf } from './geometry'
import { Moving } from './moving'
import type { SectionMark } from './timeline-types'
import { useWindowView, type ViewStore } from './view-store'

/** Lines of the bars through all lanes; the line of a section's first bar is ink. */
export const BarLines = memo(function BarLines(props: {
  store: ViewStore
  marks: BarMark[]
  sectionBars: ReadonlySet<BarIndex>
}) {
  return (
    <Moving store={props.store}>
      {props.marks.map(({ bar, x }) => (
        <span
          key={bar}
          className={`absolute inset-y-0 w-px ${props.sectionBars.has(bar) ? 'bg-ink' : 'bg-pencil/45'}`}
          style={{ left: x }}
        />
      ))}
    </Moving>
  )
})

/** Section letters where sections start. */
export const SectionLane = memo(function SectionLane(props: {
  store: ViewStore
  barMap: BarMap
  sections: readonly SectionMark[]
}) {
  const scale = scaleOf(useWindowView(props.store))
  return (
    <Moving store={props.store}>
      {props.sections.map(({ bar, name }) => (
        <span
          key={bar}
          className="absolute bottom-0 bg-sheet pr-1 pl-1 text-sm leading-5 font-semibold whitespace-nowrap"
          style={{ left: Math.max(0, props.barMap.barSec(bar) * scale) }}
        >
          {name}
        </span>
      ))}
    </Moving>
  )
})

/** Bar numbers, and the felt beats as short strokes when there is room. */
export const RulerLane = memo(function RulerLane(props: {
  store: ViewStore
  marks: BarMark[]
  barLabel: (bar: BarIndex) => string
}) {
  return (
    <Moving store={props.store}>
      {props.marks.map(({ bar, x, hasNumber, beats }) => (
        <span key={bar}>
          {hasNumber ? (
            <span className="absolute top-0.5 text-sm whitespace-nowrap text-pencil" style={{ left: x + 5 }}>
              <Figures>{props.barLabel(bar)}</Figures>
            </span>
          ) : null}
          {beats.map((beat) => (
            <span key={beat} className="absolute bottom-0 h-1.5 w-px bg-pencil" style={{ left: beat }} />
          ))}
        </span>
      ))}
    </Moving>
  )
})
