// One hand on the lanes: a click goes there, a drag selects, two clicks mark a span without dragging (WCAG 2.2, 2.5.7),
// a finger on the sound moves the paper.
import { useRef, useState, type PointerEvent } from 'react'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { clamp, orderedSpan, withScroll, xToSec } from './geometry'
import type { ViewStore } from './view-store'

/** Which click of two is waited for. */
export type Marking = { next: 'start' } | { next: 'end'; fromSec: Sec } | null

const dragPx = 4
const edgePx = 24

export interface LanePointerDeps {
  store: ViewStore
  selection: Span | null
  snapSpan: (span: Span) => Span
  /** Where a click on the ruler goes: the line of its bar. */
  lineBefore: (sec: Sec) => Sec
  onSeek: (sec: Sec) => void
  onSelect: (span: Span | null) => void
}

interface Held {
  sec: Sec
  x: number
  scrollPx: number
  isPanning: boolean
  hasMoved: boolean
  isOnRuler: boolean
}

export const useLanePointer = (deps: LanePointerDeps) => {
  const { store, selection, snapSpan } = deps
  const held = useRef<Held | null>(null)
  const [preview, setPreview] = useState<Span | null>(null)
  const [marking, setMarking] = useState<Marking>(null)

  const xOf = (event: PointerEvent<HTMLElement>) => event.clientX - event.currentTarget.getBoundingClientRect().left
  const spanTo = (from: Sec, to: Sec, isFree: boolean) =>
    isFree ? orderedSpan(from, to) : snapSpan(orderedSpan(from, to))

  const down = (event: PointerEvent<HTMLElement>, isOnRuler: boolean) => {
    if (event.button !== 0) return
    const x = xOf(event)
    const view = store.get()
    event.currentTarget.setPointerCapture(event.pointerId)
    const isPanning = event.pointerType === 'touch' && !isOnRuler
    held.current = { sec: xToSec(view, x), x, scrollPx: view.scrollPx, isPanning, hasMoved: false, isOnRuler }
  }

  const move = (event: PointerEvent<HTMLElement>) => {
    const hand = held.current
    const x = xOf(event)
    if (!hand) {
      if (marking?.next === 'end') setPreview(spanTo(marking.fromSec, xToSec(store.get(), x), event.altKey))
      return
    }
    if (!hand.hasMoved && Math.abs(x - hand.x) < dragPx) return
    hand.hasMoved = true
    const view = store.get()
    if (hand.isPanning) return store.set(withScroll(view, hand.scrollPx + hand.x - x))
    if (marking) return
    // Near an edge the paper moves along under the hand.
    const over = x < edgePx ? x - edgePx : x > view.widthPx - edgePx ? x - view.widthPx + edgePx : 0
    if (over !== 0) store.set(withScroll(view, view.scrollPx + clamp(over, -40, 40)))
    setPreview(spanTo(hand.sec, xToSec(store.get(), clamp(x, 0, view.widthPx)), event.altKey))
  }

  const up = (event: PointerEvent<HTMLElement>) => {
    const hand = held.current
    held.current = null
    if (!hand) return
    // A shaky hand may move a little between press and release while it marks: still a click.
    if (!hand.hasMoved || (marking && !hand.isPanning)) return click(event, hand)
    setPreview(null)
    if (!hand.isPanning && preview) deps.onSelect(preview)
  }

  const click = (event: PointerEvent<HTMLElement>, hand: Held) => {
    if (marking?.next === 'start') return setMarking({ next: 'end', fromSec: hand.sec })
    if (marking?.next === 'end') {
      deps.onSelect(spanTo(marking.fromSec, hand.sec, event.altKey))
      return stopMarking()
    }
    if (event.shiftKey) {
      const from = selection ? farther(selection, hand.sec) : hand.sec
      return deps.onSelect(spanTo(from, hand.sec, event.altKey))
    }
    deps.onSeek(hand.isOnRuler ? deps.lineBefore(hand.sec) : hand.sec)
  }

  const cancel = () => {
    held.current = null
    setPreview(null)
  }
  const stopMarking = () => {
    setMarking(null)
    setPreview(null)
  }

  return {
    preview,
    setPreview,
    marking,
    startMarking: () => setMarking({ next: 'start' }),
    stopMarking,
    down,
    move,
    up,
    cancel
  }
}

/** The end of a span that stays when the other one is moved to `sec`. */
const farther = (span: Span, sec: Sec): Sec =>
  Math.abs(sec - span.startSec) > Math.abs(sec - span.endSec) ? span.startSec : span.endSec
