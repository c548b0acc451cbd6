// How the reader likes chords written. Nothing personal: it stays in this browser.
import { useSyncExternalStore } from 'react'
import { z } from 'zod'
import { DEFAULT_CHORD_STYLE, type ChordStyle } from '@shared/music/chord-typeset'

const storageKey = 'plumbline.chords'

const Stored = z.object({
  majorSeventh: z.enum(['maj7', 'triangle']),
  minor: z.enum(['m', 'minus']),
  halfDiminished: z.enum(['ø', 'm7♭5']),
  diminished: z.enum(['°', 'dim'])
})

const stored = (): ChordStyle => {
  try {
    return Stored.parse(JSON.parse(localStorage.getItem(storageKey) ?? ''))
  } catch {
    // Nothing kept, or storage switched off.
    return DEFAULT_CHORD_STYLE
  }
}

let current: ChordStyle | null = null
const listeners = new Set<() => void>()

const read = (): ChordStyle => (current ??= stored())
const listen = (changed: () => void): (() => void) => {
  listeners.add(changed)
  return () => void listeners.delete(changed)
}

const choose = (style: ChordStyle): void => {
  current = style
  try {
    localStorage.setItem(storageKey, JSON.stringify(style))
  } catch {
    // The choice then lasts for this page only.
  }
  for (const changed of listeners) changed()
}

/** The same for every chart on the page. */
export const useChordStyle = (): [ChordStyle, (style: ChordStyle) => void] => [
  useSyncExternalStore(listen, read),
  choose
]
