import { useMemo } from 'react'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import type { BarMapBody } from '@shared/timing/types'
import { useDocument, type LiveDocument } from '@client/lib/use-document'

export interface LiveBarMap extends LiveDocument<BarMapBody, BarMapOperation> {
  /** Null until two places are known. */
  barMap: BarMap | null
}

/** The bars of a take as `memberId` sees and edits them. */
export const useBarMap = (takeId: string, memberId: string): LiveBarMap => {
  const document = useDocument<BarMapBody, BarMapOperation>({
    kind: barMapDocument,
    routes: barMapRoutes,
    params: { takeId },
    memberId
  })
  const { body } = document
  const barMap = useMemo(() => (body ? createBarMap(body) : null), [body])
  return { ...document, barMap }
}
