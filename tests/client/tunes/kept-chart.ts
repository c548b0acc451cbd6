// A chart that keeps its edits as the server would.
import { useState } from 'react'
import { applyAll } from '@shared/documents/merge'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import type { LiveChart } from '@client/features/tunes/use-chart'

/** Two sections of four bars, played A A B A. */
export const fourAndFour: ChartBody = {
  key: 'G minor',
  meter: '4/4',
  tempo: { min: 120, max: 160 },
  cyclic: true,
  sections: [
    { id: 'a', name: 'A', bars: ['Gm7', '%', 'Am7b5 D7', 'Gm7'] },
    { id: 'b', name: 'B', bars: ['Cm7', 'F7', 'Bbmaj7', 'N.C.'] }
  ],
  order: ['a', 'a', 'b', 'a']
}

/** Applies edits at once; one that cannot be applied fails the test. */
export const useKeptChart = (first: ChartBody, seen: (body: ChartBody) => void): LiveChart => {
  const [{ body, before }, set] = useState<{ body: ChartBody; before: ChartBody[] }>({ body: first, before: [] })
  seen(body)
  return {
    body,
    revision: before.length,
    unsent: 0,
    canUndo: before.length > 0,
    canRedo: false,
    fault: null,
    refused: null,
    dismissRefused: () => undefined,
    edit: (operations: ChartOperation[]) => {
      const applied = applyAll(chartDocument, body, operations)
      if (!applied.ok) throw new Error(applied.error.message)
      set({ body: applied.value.body, before: [...before, body] })
    },
    undo: async () => {
      const last = before.at(-1)
      if (last) set({ body: last, before: before.slice(0, -1) })
    },
    redo: async () => undefined
  }
}
