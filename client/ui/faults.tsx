// Carries the `errors` of a problem answer (RFC 9457 extension) from a form to the field each belongs to.
import { createContext, useCallback, useContext, useEffect, useMemo, useState } from 'react'
import type { ComponentProps, ReactNode } from 'react'
import { Notice } from './notice'

export interface FieldFault {
  /** Part of the request: `body`, `query` … */
  in: string
  /** Dotted path of the faulty value; a field of the same `name` shows the message. */
  path: string
  message: string
}

interface Faults {
  faults: readonly FieldFault[]
  /** Says that a field shows the faults of this path; returns the taking-back. */
  claim(path: string): () => void
}

const FaultsContext = createContext<Faults>({ faults: [], claim: () => () => undefined })

/** The message for one field, if any; `own` (a check made in the browser) goes first. */
export function useFault(name: string | undefined, own?: string | null): string | undefined {
  const { faults, claim } = useContext(FaultsContext)
  useEffect(() => (name ? claim(name) : undefined), [name, claim])
  if (own) return own
  return name ? faults.find((fault) => fault.path === name)?.message : undefined
}

export interface FormProps extends Omit<ComponentProps<'form'>, 'className' | 'onSubmit'> {
  /** `problem.errors` of the last answer. */
  errors?: readonly FieldFault[] | null
  /** A fault that belongs to no field (`problem.detail` or title). */
  fault?: string | null
  onSubmit: () => void
  children: ReactNode
}

const none: readonly FieldFault[] = []

export function Form({ errors, fault, onSubmit, children, ...rest }: FormProps) {
  const faults = errors ?? none
  const [claimed, setClaimed] = useState<readonly string[]>([])
  const claim = useCallback((path: string) => {
    setClaimed((paths) => [...paths, path])
    return () =>
      setClaimed((paths) => {
        const at = paths.indexOf(path)
        return paths.filter((_, index) => index !== at)
      })
  }, [])
  const value = useMemo(() => ({ faults, claim }), [faults, claim])
  const homeless = faults.filter(({ path }) => !claimed.includes(path))
  const words = [fault, ...homeless.map(({ message }) => message)].filter(Boolean)
  return (
    <FaultsContext value={value}>
      <form
        {...rest}
        noValidate
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault()
          onSubmit()
        }}
      >
        {words.length > 0 ? <Notice kind="fault">{words.join(' ')}</Notice> : null}
        {children}
      </form>
    </FaultsContext>
  )
}
