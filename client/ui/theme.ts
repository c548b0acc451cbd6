// The reader's choice of daylight or late set. Nothing personal: it stays in this browser.
import { useState } from 'react'

export type ThemeChoice = 'system' | 'light' | 'dark'

const storageKey = 'plumbline.theme'

function storedChoice(): ThemeChoice {
  try {
    const value = localStorage.getItem(storageKey)
    return value === 'light' || value === 'dark' ? value : 'system'
  } catch {
    // Storage may be switched off; the system's theme still works.
    return 'system'
  }
}

function apply(choice: ThemeChoice): void {
  if (choice === 'system') delete document.documentElement.dataset.theme
  else document.documentElement.dataset.theme = choice
}

/** Called once before the first render, so that the page does not flash in the other theme. */
export const applyStoredTheme = (): void => apply(storedChoice())

export function useTheme(): [ThemeChoice, (choice: ThemeChoice) => void] {
  const [choice, setChoice] = useState(storedChoice)
  const choose = (next: ThemeChoice) => {
    setChoice(next)
    apply(next)
    try {
      if (next === 'system') localStorage.removeItem(storageKey)
      else localStorage.setItem(storageKey, next)
    } catch {
      // The choice then lasts for this page only.
    }
  }
  return [choice, choose]
}
