// What the lanes of a take are made of: its bars, its tune's chart, its comments, its peaks.
import { useMemo } from 'react'
import type { Me } from '@shared/contracts/account'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import type { Take } from '@shared/contracts/takes'
import { type Tune, tuneRoutes } from '@shared/contracts/tunes'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { useTakeComments, type TakeComments } from '@client/features/comments/api'
import type { ShownComment } from '@client/features/comments/changes'
import { lettersOf } from '@client/features/comments/letters'
import { usePeaks } from '@client/features/takes/peaks'
import { useRouteQuery } from '@client/lib/query'
import { useDocument, type LiveDocument } from '@client/lib/use-document'
import type { PeaksSource } from '@client/timeline/peaks-source'
import type { CommentSpan } from '@client/timeline/timeline-types'
import type { BarMapBody } from '@shared/timing/types'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import { deskModel, type DeskModel } from './desk-model'

export interface TakeMaterial {
  bars: LiveDocument<BarMapBody, BarMapOperation>
  tune: Tune | null
  comments: TakeComments
  letters: ReadonlyMap<string, string>
  spans: readonly CommentSpan[]
  peaks: PeaksSource | null
  model: DeskModel
  /** Bars and chart have been read, or it is known that there are none. */
  isSettled: boolean
}

export const useTakeMaterial = (take: Take, me: Me): TakeMaterial => {
  const { id: takeId, tuneId } = take
  const bars = useDocument({
    kind: barMapDocument,
    routes: barMapRoutes,
    params: useMemo(() => ({ takeId }), [takeId]),
    memberId: me.id
  })
  const tune = useRouteQuery(tuneRoutes.get, { params: { tuneId: tuneId ?? '' } }, { enabled: tuneId !== null })
  const comments = useTakeComments(takeId, me)
  const peaks = usePeaks(takeId, take.state === 'ready')

  const durationSec = take.durationSec ?? 0
  const chart = (tuneId && tune.data?.chart) || null
  const { body, fault } = bars
  const model = useMemo(() => deskModel({ durationSec, bars: body, chart }), [durationSec, body, chart])
  const letters = useMemo(() => lettersOf(comments.comments), [comments.comments])
  const spans = useMemo(
    () => comments.comments.map((comment) => spanOf(comment, letters, model)),
    [comments.comments, letters, model]
  )
  return {
    bars,
    tune: (tuneId && tune.data) || null,
    comments,
    letters,
    spans,
    peaks,
    model,
    isSettled: (body !== null || fault !== null) && (tuneId === null || !tune.isPending) && !comments.isLoading
  }
}

const spanOf = (comment: ShownComment, letters: ReadonlyMap<string, string>, model: DeskModel): CommentSpan => {
  const span = { startSec: comment.startSec, endSec: comment.endSec }
  return {
    id: comment.id,
    span,
    letter: letters.get(comment.id) ?? '',
    label: `${comment.kind} by ${comment.author.name}, ${model.placeOf(span).place}`,
    isOpen: comment.isOpen
  }
}
