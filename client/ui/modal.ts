import { useEffect, useRef } from 'react'
import type { RefObject } from 'react'

/** Opens a native dialog over the page while mounted; the focus goes back to where it was when it leaves. */
export function useModal(): RefObject<HTMLDialogElement | null> {
  const dialog = useRef<HTMLDialogElement>(null)
  useEffect(() => {
    const element = dialog.current
    if (!element) return undefined
    const before = document.activeElement
    if (!element.open) element.showModal()
    return () => {
      element.close()
      // Unmounting takes the element away before the browser can return the focus by itself.
      if (before instanceof HTMLElement && before.isConnected) before.focus()
    }
  }, [])
  return dialog
}
