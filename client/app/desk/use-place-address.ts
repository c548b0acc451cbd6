// The address of the desk follows what is looked at, and an address that is opened leads there.
import { useEffect, useRef } from 'react'
import { useLocation } from 'react-router-dom'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import type { Player } from '@client/transport/player'
import type { Span } from '@shared/timing/types'
import type { DeskModel } from './desk-model'
import { readAddress, spanOfWhere, whereOfSpan, writeAddress, type PlaceAddress } from './place-address'

export interface PlaceAddressDeps {
  model: DeskModel
  player: Player
  /** Bars and chart are there, or it is known that there are none; the sound can be sought in. */
  isSettled: boolean
  selection: Span | null
  commentId: string | null
  onOpen: (address: PlaceAddress, span: Span | null) => void
}

/** Browsers refuse a page that renames itself more than about a hundred times in half a minute. */
const writeEveryMs = 500

/** The address of this desk as it stands, for copying. */
export const deskAddress = ({
  model,
  player,
  selection,
  commentId
}: Omit<PlaceAddressDeps, 'onOpen' | 'isSettled'>) => {
  const query = writeAddress(
    {
      where: selection ? whereOfSpan(selection, model) : null,
      comment: commentId,
      speed: Math.round(player.rate * 100),
      loop: player.loop !== null
    },
    new URLSearchParams(window.location.search)
  ).toString()
  return `${window.location.pathname}${query ? `?${query}` : ''}`
}

export const usePlaceAddress = (deps: PlaceAddressDeps): void => {
  const latest = useLatest(deps)
  const location = useLocation()
  const opened = useRef<string | null>(null)
  const { isSettled, player } = deps

  useEffect(() => {
    if (!isSettled || opened.current === location.key) return
    opened.current = location.key
    const address = readAddress(new URLSearchParams(location.search))
    const { model, onOpen } = latest.current
    onOpen(address, address.where ? spanOfWhere(address.where, model) : null)
  }, [isSettled, location.key, location.search, latest])

  useScope(
    (scope) => {
      if (!isSettled) return
      scope.interval(() => {
        if (opened.current === null) return
        const address = deskAddress(latest.current)
        const now = `${window.location.pathname}${window.location.search}`
        if (address !== now) window.history.replaceState(window.history.state, '', address)
      }, writeEveryMs)
    },
    [isSettled, player, latest]
  )
}
