import { startTransition, useState } from 'react'
import { useScope } from '@client/lib/scope'

const atOnce = 30
const step = 40
const everyMs = 40

/** How many of so many are drawn: the first ones at once, the others in between what else the page has to do. */
export const useGrowing = (count: number, atLeast: number): number => {
  const [limit, setLimit] = useState(atOnce)
  const drawn = Math.min(count, Math.max(limit, atLeast))
  useScope(
    (scope) => {
      if (drawn < count) scope.timeout(() => startTransition(() => setLimit(drawn + step)), everyMs)
    },
    [drawn, count]
  )
  return drawn
}
