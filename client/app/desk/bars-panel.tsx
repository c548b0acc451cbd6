import { useEffect, useRef, useState } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Tune } from '@shared/contracts/tunes'
import { formLength } from '@shared/music/form'
import { readMeter } from '@shared/timing/meter'
import type { Span } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'
import { useUpdateMe } from '@client/features/account/api'
import { BarEditor } from '@client/features/bar-maps/bar-editor'
import type { TuneHint } from '@client/features/bar-maps/editor-props'
import type { TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'
import { PanelBoundary } from './panel-boundary'
import type { TakeMaterial } from './use-take-material'

export interface BarsPanelProps {
  me: Me
  material: TakeMaterial
  player: Player
  controls: TransportControls
  selection: Span | null
  onClose: () => void
}

const hintOf = ({ chart }: Tune): TuneHint => ({
  meter: readMeter(chart.meter),
  formLength: formLength(chart),
  cyclic: chart.cyclic,
  tempo: chart.tempo
})

/** Laying and correcting bars, under the timeline. */
export function BarsPanel({ me, material, player, controls, selection, onClose }: BarsPanelProps) {
  const [bar, setBar] = useState<BarIndex | null>(null)
  const update = useUpdateMe()
  const box = useRef<HTMLDivElement>(null)
  const { preview } = material
  useEffect(() => {
    void box.current?.scrollIntoView({ block: 'nearest' })
  }, [])
  // Bars that were only tried go with the panel.
  useEffect(() => () => preview(null), [preview])
  return (
    <div ref={box}>
      <PanelBoundary name="the bars">
        <BarEditor
          document={material.bars}
          edits={material.edits}
          player={player}
          controls={controls}
          durationSec={material.model.durationSec}
          tune={material.tune ? hintOf(material.tune) : null}
          selection={selection}
          bar={bar}
          onBar={setBar}
          tapLagMs={me.tapLagMs}
          onTapLag={(tapLagMs) => update.mutate({ body: { tapLagMs } })}
          onPreview={preview}
          onClose={onClose}
        />
      </PanelBoundary>
    </div>
  )
}
