import { createContext, useCallback, useContext, useRef, useState } from 'react'
import type { ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import { createLiveQueue } from './live-queue'
import type { LiveQueue } from './live-queue'

const SayContext = createContext<(message: string) => void>(() => undefined)

/** Tells assistive technology, politely and without moving the focus: `say('Mara leads now.')`. */
export const useSay = (): ((message: string) => void) => useContext(SayContext)

/** Stands once around the application; holds the log that screen readers follow (WCAG 4.1.3). */
export function LiveLog({ children }: { children: ReactNode }) {
  const queue = useRef<LiveQueue | null>(null)
  const [spoken, setSpoken] = useState<{ id: number; text: string }[]>([])
  useScope((scope) => {
    let id = 0
    queue.current = createLiveQueue(scope, (text) => {
      id += 1
      const line = { id, text }
      setSpoken((lines) => [...lines.slice(-4), line])
    })
    scope.add(() => {
      queue.current = null
    })
  }, [])
  const say = useCallback((message: string) => queue.current?.say(message), [])
  return (
    <SayContext value={say}>
      {children}
      <div role="log" aria-live="polite" aria-label="What happened" className="sr-only">
        {spoken.map(({ id, text }) => (
          <p key={id}>{text}</p>
        ))}
      </div>
    </SayContext>
  )
}
