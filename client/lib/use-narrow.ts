import { useState } from 'react'
import { useScope } from './scope'

/** True on screens narrower than so many pixels. */
export const useNarrow = (px: number): boolean => {
  const query = `(max-width: ${px - 0.02}px)`
  const [isNarrow, setNarrow] = useState(() => matchMedia(query).matches)
  useScope(
    (scope) => {
      const list = matchMedia(query)
      setNarrow(list.matches)
      scope.listen(list, 'change', ({ matches }) => setNarrow(matches))
    },
    [query]
  )
  return isNarrow
}
