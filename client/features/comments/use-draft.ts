import { useCallback, useEffect, useRef, useState } from 'react'
import { drafts } from '@client/features/comments/outbox'

export interface Draft<T> {
  value: T
  /** Null until it is known whether an earlier visit left one. */
  isRead: boolean
  write: (value: T) => void
  drop: () => void
}

/** Words not said yet: they survive a reload and looking at another take. Empty ones are not kept. */
export const useDraft = <T extends { text: string }>(memberId: string, about: string, empty: T): Draft<T> => {
  const [kept, setKept] = useState<{ about: string; value: T } | null>(null)
  const isTouched = useRef(false)
  useEffect(() => {
    let isOver = false
    isTouched.current = false
    void drafts.read<T>(memberId, about).then((value) => {
      if (!isOver && !isTouched.current) setKept({ about, value: value ?? empty })
    })
    return () => {
      isOver = true
    }
    // `empty` is a new object each time and says the same.
    // oxlint-disable-next-line react-hooks/exhaustive-deps
  }, [memberId, about])

  const write = useCallback(
    (value: T) => {
      isTouched.current = true
      setKept({ about, value })
      void (value.text.trim() ? drafts.keep(memberId, about, value) : drafts.drop(memberId, about))
    },
    [memberId, about]
  )
  const drop = useCallback(() => {
    isTouched.current = true
    setKept({ about, value: empty })
    void drafts.drop(memberId, about)
    // oxlint-disable-next-line react-hooks/exhaustive-deps
  }, [memberId, about])
  const isRead = kept?.about === about
  return { value: isRead ? kept.value : empty, isRead, write, drop }
}
