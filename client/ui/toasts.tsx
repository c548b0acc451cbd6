import { createContext, useCallback, useContext, useMemo, useRef, useState } from 'react'
import type { ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import { Button } from './button'
import { IconButton } from './icon-button'

export interface Toast {
  /** What was done: "Comment deleted." */
  text: string
  /** The way back. */
  undo?: () => void
  /** Stays this long without being looked at; 10 s unless said otherwise. */
  keepMs?: number
}

interface Shown extends Toast {
  id: number
}

const ToastContext = createContext<(toast: Toast) => void>(() => undefined)

/** `toast({ text: 'Comment deleted.', undo })` */
export const useToast = (): ((toast: Toast) => void) => useContext(ToastContext)

const atMost = 3

/** A page with a bar at its foot sets `--foot` to its height on <html>, so that toasts never cover it. */
export function Toasts({ children }: { children: ReactNode }) {
  const [shown, setShown] = useState<Shown[]>([])
  const nextId = useRef(0)
  const toast = useCallback((added: Toast) => {
    nextId.current += 1
    const id = nextId.current
    setShown((toasts) => [...toasts.slice(1 - atMost), { ...added, id }])
  }, [])
  const leave = useCallback((id: number) => setShown((toasts) => toasts.filter((other) => other.id !== id)), [])
  return (
    <ToastContext value={toast}>
      {children}
      <output className="pointer-events-none fixed inset-x-3 bottom-[calc(var(--foot,0px)+0.75rem)] z-40 grid justify-items-start gap-2">
        {shown.map((one) => (
          <ToastLine key={one.id} toast={one} onLeave={leave} />
        ))}
      </output>
    </ToastContext>
  )
}

/** Waits while the pointer or the focus is on it, so that nobody has to hurry (WCAG 2.2.1). */
function ToastLine({ toast, onLeave }: { toast: Shown; onLeave: (id: number) => void }) {
  const [isHeld, setHeld] = useState(false)
  const leave = useMemo(() => () => onLeave(toast.id), [onLeave, toast.id])
  useScope(
    (scope) => {
      if (!isHeld) scope.timeout(leave, toast.keepMs ?? 10_000)
    },
    [isHeld, leave, toast.keepMs]
  )
  return (
    <div
      className="pointer-events-auto flex max-w-full items-center gap-2 rounded border border-pencil bg-sheet py-1 pr-1 pl-4 text-ink"
      onPointerEnter={() => setHeld(true)}
      onPointerLeave={() => setHeld(false)}
      onFocus={() => setHeld(true)}
      onBlur={() => setHeld(false)}
    >
      <p className="min-w-0 break-words">{toast.text}</p>
      {toast.undo ? (
        <Button
          look="quiet"
          icon="undo"
          onClick={() => {
            toast.undo?.()
            leave()
          }}
        >
          Undo
        </Button>
      ) : null}
      <IconButton icon="close" label="Dismiss" onClick={leave} />
    </div>
  )
}
