// What the lanes of a take are made of: its bars, its tune's chart, its comments, its peaks.
import { useMemo, useState } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Take } from '@shared/contracts/takes'
import { type Tune, tuneRoutes } from '@shared/contracts/tunes'
import { useBarEdits, type BarEdits } from '@client/features/bar-maps/use-bar-edits'
import { useBarMap, type LiveBarMap } from '@client/features/bar-maps/use-bar-map'
import { useTakeComments, type TakeComments } from '@client/features/comments/api'
import type { ShownComment } from '@client/features/comments/changes'
import { lettersOf } from '@client/features/comments/letters'
import { usePeaks } from '@client/features/takes/peaks'
import { useChordStyle } from '@client/features/tunes/chord-style'
import { useRouteQuery } from '@client/lib/query'
import type { PeaksSource } from '@client/timeline/peaks-source'
import type { CommentSpan } from '@client/timeline/timeline-types'
import type { ChordStyle } from '@shared/music/chord-typeset'
import type { ChartBody } from '@shared/music/types'
import type { BarMapBody } from '@shared/timing/types'
import { deskModel, type DeskModel } from './desk-model'

export interface TakeMaterial {
  bars: LiveBarMap
  edits: BarEdits
  /** Draws these bars in place of the kept ones, while they wait for an answer. */
  preview: (body: BarMapBody | null) => void
  chordStyle: ChordStyle
  /** Draws this chart in place of the kept one, while it is being edited. */
  previewChart: (body: ChartBody | null) => void
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
  const bars = useBarMap(takeId, me.id)
  const edits = useBarEdits(bars)
  const [previewed, preview] = useState<BarMapBody | null>(null)
  const [chordStyle] = useChordStyle()
  const [editedChart, previewChart] = useState<ChartBody | null>(null)
  const tune = useRouteQuery(tuneRoutes.get, { params: { tuneId: tuneId ?? '' } }, { enabled: tuneId !== null })
  const comments = useTakeComments(takeId, me)
  const peaks = usePeaks(takeId, take.state === 'ready')

  const durationSec = take.durationSec ?? 0
  const chart = editedChart ?? ((tuneId && tune.data?.chart) || null)
  const { body, fault } = bars
  const drawn = previewed ?? body
  const model = useMemo(
    () => deskModel({ durationSec, bars: drawn, chart, style: chordStyle }),
    [durationSec, drawn, chart, chordStyle]
  )
  const letters = useMemo(() => lettersOf(comments.comments), [comments.comments])
  const spans = useMemo(
    () => comments.comments.map((comment) => spanOf(comment, letters, model)),
    [comments.comments, letters, model]
  )
  return {
    bars,
    edits,
    preview,
    chordStyle,
    previewChart,
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
