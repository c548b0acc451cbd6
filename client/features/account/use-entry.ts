import { useState } from 'react'
import type { ApiProblem } from '@client/lib/api'
import type { FieldFault } from '@client/ui/faults'
import { problemWords } from './problem-words'
import { useFocusFault } from './use-focus-fault'

const none: readonly FieldFault[] = []

/** What the forms about accounts share: faults found here first, then those of the answer, and the focus on the first of them. */
export const useEntry = (problem: ApiProblem | null) => {
  const [own, setOwn] = useState<readonly FieldFault[]>(none)
  const errors = own.length > 0 ? own : (problem?.fields ?? none)
  const ref = useFocusFault(errors)
  return {
    form: { ref, errors, fault: own.length > 0 ? null : problemWords(problem) },
    /** True when nothing is missing; else the form says what is. */
    passes: (faults: FieldFault[]): boolean => {
      setOwn(faults)
      return faults.length === 0
    }
  }
}
