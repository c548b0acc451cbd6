// Ctrl or Command with Z and Y where the focus is inside something that is edited.
interface KeyPress {
  key: string
  ctrlKey: boolean
  metaKey: boolean
  shiftKey: boolean
  altKey: boolean
  target: EventTarget | null
  defaultPrevented: boolean
  preventDefault(): void
}

/** Text fields take back their own typing first. */
const hasOwnUndo = (target: EventTarget | null): boolean =>
  target instanceof HTMLTextAreaElement ||
  (target instanceof HTMLInputElement && !['checkbox', 'radio', 'range', 'button'].includes(target.type))

/** What a pressed key asks for; null when it is none of the two or belongs to a text field. */
export const undoKeyOf = (event: Omit<KeyPress, 'preventDefault'>): 'undo' | 'redo' | null => {
  if (!(event.ctrlKey || event.metaKey) || event.altKey || event.defaultPrevented || hasOwnUndo(event.target))
    return null
  const key = event.key.toLowerCase()
  if (key === 'z') return event.shiftKey ? 'redo' : 'undo'
  return key === 'y' && !event.shiftKey ? 'redo' : null
}

/** For `onKeyDown` of the part of the page that is edited. */
export const handleUndoKey = (event: KeyPress, document: { undo(): Promise<void>; redo(): Promise<void> }): void => {
  const asked = undoKeyOf(event)
  if (!asked) return
  event.preventDefault()
  void document[asked]()
}
