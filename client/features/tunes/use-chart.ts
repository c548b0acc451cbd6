import { chartRoutes } from '@shared/contracts/tunes'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { useDocument, type LiveDocument } from '@client/lib/use-document'

export type LiveChart = LiveDocument<ChartBody, ChartOperation>

/** The chart of a tune as `memberId` sees and edits it. */
export const useChart = (tuneId: string, memberId: string): LiveChart =>
  useDocument<ChartBody, ChartOperation>({
    kind: chartDocument,
    routes: chartRoutes,
    params: { tuneId },
    memberId
  })
