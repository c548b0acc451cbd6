import { memo } from 'react'
import type { Span } from '@shared/timing/types'
import { scaleOf } from './geometry'
import { Moving } from './moving'
import { useWindowView, type ViewStore } from './view-store'

/** The selected span, a wash behind the sound with an edge on both sides. */
export const SelectionBand = memo(function SelectionBand({ store, span }: { store: ViewStore; span: Span | null }) {
  const scale = scaleOf(useWindowView(store))
  if (!span) return null
  const width = Math.max(1, (span.endSec - span.startSec) * scale)
  return (
    <Moving store={store}>
      <span
        data-testid="selection"
        className="absolute inset-y-0 border-x border-ink bg-wash"
        style={{ left: span.startSec * scale, width }}
      />
    </Moving>
  )
})
