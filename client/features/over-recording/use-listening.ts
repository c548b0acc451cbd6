import { useEffect, useRef, useState } from 'react'
import { createPlayer } from '@client/transport/create-player'
import type { Player } from '@client/transport/player'
import { playTogether, type Together } from './listen-together'
import { browserTryStore, fileOfTry } from './try-store'
import type { ListedTry } from './use-tries'

export interface Listening {
  /** Which try is heard. */
  tryId: string | null
  fault: string | null
  /** `prepare` gives the take's player, set for listening to this try. */
  listen(listed: ListedTry, prepare: () => Promise<Player>): Promise<void>
  stop(): void
}

const goneWords = 'A part of this try is missing in this browser.'
const quietWords = 'It could not be played. Press once more.'
/** Its own loudness is not measured yet: moderate. */
const tryVolume = 0.8

/** One try at a time beside the take. */
export const useListening = (): Listening => {
  const [tryId, setTryId] = useState<string | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const open = useRef<{ end: () => void } | null>(null)
  const stop = (): void => {
    open.current?.end()
    open.current = null
    setTryId(null)
  }
  useEffect(() => () => open.current?.end(), [])

  const listen: Listening['listen'] = async ({ recorded, one }, prepare) => {
    stop()
    setFault(null)
    setTryId(one.id)
    const own = createPlayer()
    let together: Together | null = null
    let url = ''
    let isOver = false
    const mine = {
      end: () => {
        isOver = true
        together?.dispose()
        own.dispose()
        if (url) URL.revokeObjectURL(url)
      }
    }
    open.current = mine
    const file = await fileOfTry(recorded, one, 'try', browserTryStore)
    if (isOver) return
    if (!file) {
      setFault(goneWords)
      return stop()
    }
    url = URL.createObjectURL(file)
    const [take] = await Promise.all([
      prepare(),
      own.load({ url, file, durationSec: one.cut.frames / recorded.sampleRate })
    ])
    if (isOver) return
    together = playTogether(take, own, one.cut, tryVolume)
    const isOut = await together.play(0)
    if (isOver) return
    if (!isOut) {
      setFault(quietWords)
      return stop()
    }
    own.on('state', (state) => {
      if (state === 'ready' && open.current === mine) stop()
    })
  }
  return { tryId, fault, listen, stop }
}
