import { useState } from 'react'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'

const storageKey = 'plumbline.headphones'

const isKnown = (): boolean => {
  try {
    return localStorage.getItem(storageKey) !== null
  } catch {
    return false
  }
}

/** Said once in this browser. */
export function HeadphonesHint() {
  const [isSeen, setSeen] = useState(isKnown)
  if (isSeen) return null
  const handleSeen = () => {
    setSeen(true)
    try {
      localStorage.setItem(storageKey, 'said')
    } catch {
      // It is said again in another page then.
    }
  }
  return (
    <Notice title="Use headphones" next={<Button onClick={handleSeen}>I have them on</Button>}>
      Over loudspeakers the take and the click would be recorded along with you.
    </Notice>
  )
}
