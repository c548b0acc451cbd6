// A player whose place is set by hand, and a document that keeps its edits as the server would.
import { plainAids } from '@shared/audio/listening'
import { applyAll } from '@shared/documents/merge'
import { createBarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import type { BarMapBody } from '@shared/timing/types'
import { useState } from 'react'
import type { LiveBarMap } from '@client/features/bar-maps/use-bar-map'
import type { TransportControls } from '@client/transport/controls'
import type { Player, PlayerLoop } from '@client/transport/player'

export interface FakePlayer extends Player {
  heardPosition: number
  rate: number
  loop: PlayerLoop | null
}

export const fakePlayer = (): { player: FakePlayer; controls: TransportControls; asked: string[] } => {
  const asked: string[] = []
  const player: FakePlayer = {
    capabilities: { pitch: false, schedule: false, aids: false, clicks: false },
    state: 'ready',
    durationSec: 120,
    heardPosition: 0,
    rate: 1,
    semitones: 0,
    volume: 0.7,
    loop: null,
    aids: plainAids,
    clock: () => 0,
    positionAt: () => player.heardPosition,
    load: async () => undefined,
    play: async () => true,
    pause: () => undefined,
    seek: (sec) => {
      player.heardPosition = sec
    },
    setRate: (rate) => {
      player.rate = rate
    },
    setPitch: () => undefined,
    setVolume: () => undefined,
    setTrim: () => undefined,
    setAids: () => undefined,
    setClicks: () => undefined,
    setCountIn: () => undefined,
    setLoop: (loop) => {
      player.loop = loop
    },
    on: () => () => undefined,
    dispose: () => undefined
  }
  const controls: TransportControls = {
    play: () => void asked.push('play'),
    pause: () => void asked.push('pause'),
    seek: (sec) => {
      asked.push(`seek ${sec}`)
      player.seek(sec)
    },
    setRate: (rate) => {
      asked.push(`rate ${rate}`)
      player.setRate(rate)
    },
    setLoop: (span) => {
      asked.push(span ? 'loop' : 'no loop')
      player.setLoop(span ? { span } : null)
    }
  }
  return { player, controls, asked }
}

interface Kept {
  body: BarMapBody
  before: BarMapBody[]
}

/** Applies edits at once; an edit that cannot be applied fails the test. */
export const useKeptBars = (first: BarMapBody): LiveBarMap => {
  const [{ body, before }, set] = useState<Kept>({ body: first, before: [] })
  return {
    body,
    barMap: createBarMap(body),
    revision: before.length,
    unsent: 0,
    canUndo: before.length > 0,
    canRedo: false,
    fault: null,
    refused: null,
    dismissRefused: () => undefined,
    edit: (operations: BarMapOperation[]) => {
      const applied = applyAll(barMapDocument, body, operations)
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
