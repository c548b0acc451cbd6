import { useSearchParams } from 'react-router-dom'

/** What is on the first screen: its own address each, so that Back and a reload do what one expects. */
export type Step = 'listen' | 'keep' | 'record'

const steps: readonly string[] = ['listen', 'keep', 'record'] satisfies Step[]

export const stepPath = (step: Step): string => `/?step=${step}`

export const useStep = () => {
  const [query, setQuery] = useSearchParams()
  const named = query.get('step')
  return {
    step: named !== null && steps.includes(named) ? (named as Step) : null,
    /** `replace` where Back should not lead here again. */
    go: (step: Step | null, replace = false): void => setQuery(step ? { step } : {}, { replace })
  }
}
