import { type RefObject, useEffect, useRef } from 'react'
import type { FieldFault } from '@client/ui/faults'

/** Puts the focus on the first field with a fault each time faults are told. */
export const useFocusFault = (errors: readonly FieldFault[]): RefObject<HTMLFormElement | null> => {
  const form = useRef<HTMLFormElement>(null)
  useEffect(() => {
    if (errors.length > 0) form.current?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus()
  }, [errors])
  return form
}
