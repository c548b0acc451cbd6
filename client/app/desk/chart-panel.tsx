import { useEffect, useId, useRef } from 'react'
import { Link } from 'react-router-dom'
import type { Tune } from '@shared/contracts/tunes'
import type { ChordStyle } from '@shared/music/chord-typeset'
import type { ChartBody } from '@shared/music/types'
import { ChartSheet } from '@client/features/tunes/chart-sheet'
import { RefusedChart } from '@client/features/tunes/refused-chart'
import { useChart } from '@client/features/tunes/use-chart'
import { paths } from '@client/lib/paths'
import { handleUndoKey } from '@client/lib/undo-keys'
import { IconButton } from '@client/ui/icon-button'
import { PanelBoundary } from './panel-boundary'
import { quietClass } from './quiet-button'

export interface ChartPanelProps {
  tune: Tune
  memberId: string
  style: ChordStyle
  /** What the lanes show while the panel is open: one's own edits at once. */
  onBody: (body: ChartBody | null) => void
  onClose: () => void
}

/** The chart of the take's tune, edited bar by bar under the timeline. */
export function ChartPanel(props: ChartPanelProps) {
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => {
    void box.current?.scrollIntoView({ block: 'nearest' })
  }, [])
  return (
    <div ref={box}>
      <PanelBoundary name="the chart">
        <Chart {...props} />
      </PanelBoundary>
    </div>
  )
}

function Chart({ tune, memberId, style, onBody, onClose }: ChartPanelProps) {
  const document = useChart(tune.id, memberId)
  const { body, edit } = document
  const id = useId()
  useEffect(() => {
    onBody(body)
  }, [body, onBody])
  useEffect(() => () => onBody(null), [onBody])
  const canEdit = tune.abilities.includes('tune:edit')
  return (
    // Undo and redo from the keyboard wherever the focus is in the panel; the controls are the buttons.
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
    <section
      aria-labelledby={id}
      className="grid min-w-0 gap-3 border-t border-rule px-4 py-3 sm:px-5"
      onKeyDown={(event) => handleUndoKey(event, document)}
    >
      <header className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
        <h2 id={id} className="text-base font-semibold">
          Chart of {tune.title}
        </h2>
        <div className="flex items-center gap-1">
          <Link to={paths.tune(tune.id)} className={quietClass}>
            Key, form and whole chart
          </Link>
          <IconButton
            icon="undo"
            label="Undo the last change of the chart"
            disabled={!document.canUndo}
            onClick={() => void document.undo()}
          />
          <IconButton icon="close" label="Close the chart" onClick={onClose} />
        </div>
      </header>
      <RefusedChart document={document} />
      {body ? <ChartSheet body={body} style={style} {...(canEdit ? { onEdit: edit } : {})} /> : null}
    </section>
  )
}
