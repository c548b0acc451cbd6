import { useEffect, useState, type ReactNode } from 'react'
import type { Take } from '@shared/contracts/takes'
import { timeWords } from '@shared/timing/time-words'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { RelativeTime } from '@client/ui/relative-time'
import { fileOfPieces, useFinishLater, useThrowAway, type KeepWords } from './finish'
import { type Begun, unfinishedOf } from './piece-store'
import type { KeepSlot } from './recorder'

export interface UnfinishedProps {
  /** Null before signing in. What was recorded then is also shown to whoever signs in after. */
  ownerId: string | null
  renderKeep: (slot: KeepSlot, groupId: string) => ReactNode
  onKept: (take: Take) => void
  onFile: (file: File, durationSec: number) => void
}

/** Recordings that a closed lid or a reload cut off. */
export function Unfinished({ ownerId, ...rest }: UnfinishedProps) {
  const [begun, setBegun] = useState<readonly Begun[]>([])
  useEffect(() => {
    let isOver = false
    const owners = ownerId ? [ownerId, null] : [null]
    void Promise.all(owners.map((owner) => unfinishedOf(owner))).then((found) => isOver || setBegun(found.flat()))
    return () => {
      isOver = true
    }
  }, [ownerId])
  return begun.map((one) => (
    <OneUnfinished
      key={one.id}
      {...rest}
      begun={one}
      onGone={() => setBegun(begun.filter(({ id }) => id !== one.id))}
    />
  ))
}

type OneProps = Omit<UnfinishedProps, 'ownerId'> & { begun: Begun; onGone: () => void }

function OneUnfinished({ begun, renderKeep, onKept, onFile, onGone }: OneProps) {
  const [isKeeping, setKeeping] = useState(false)
  const [isBusy, setBusy] = useState(false)
  const [fault, setFault] = useState<string | null>(null)
  const finishLater = useFinishLater()
  const throwAway = useThrowAway()
  const { groupId } = begun

  const keep = async (words: KeepWords): Promise<void> => {
    if (!groupId) return
    setBusy(true)
    setFault(null)
    try {
      const take = await finishLater({ ...begun, groupId }, words)
      onGone()
      onKept(take)
    } catch (error) {
      setFault(error instanceof Error ? error.message : 'It could not be kept. Try again.')
      setBusy(false)
    }
  }
  const open = async (): Promise<void> => {
    const file = await fileOfPieces(begun)
    if (!file) return setFault('A part of this recording is missing in this browser.')
    onFile(file, begun.lengthSec)
    await throwAway({ id: begun.id, groupId: null })
  }
  const handleThrowAway = (): void => {
    onGone()
    void throwAway(begun)
  }
  if (isKeeping && groupId)
    return renderKeep({ isBusy, fault, onKeep: (words) => void keep(words), onBack: () => setKeeping(false) }, groupId)
  return (
    <Notice
      title="A recording was not finished"
      next={
        <>
          <Button onClick={() => (groupId ? setKeeping(true) : void open())}>{groupId ? 'Keep it' : 'Open it'}</Button>
          <Button look="quiet" icon="bin" onClick={handleThrowAway}>
            Throw it away
          </Button>
        </>
      }
    >
      You began it <RelativeTime at={new Date(begun.startedMs).toISOString()} />; {timeWords(begun.lengthSec)} of it are
      here.
      {fault ? <span className="block text-fault">{fault}</span> : null}
    </Notice>
  )
}
