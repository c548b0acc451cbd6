// Which of one's own edits undo and redo would take: pure, so that server and tests agree.

export interface HistoryEdit {
  id: string
  undoes: string | null
  redoes: string | null
}

/**
 * @param newestFirst one person's edits of a document, newest first
 * @returns `undo`: the edit to take back next; `redo`: the edit taken back last, unless something new was done since
 */
export const nextInHistory = (newestFirst: readonly HistoryEdit[]): { undo: string | null; redo: string | null } => {
  const takenBack: string[] = []
  const doneAgain = new Set<string>()
  const cancelled = new Set<string>()
  let undo: string | null = null
  let isRedoOpen = true
  for (const edit of newestFirst) {
    if (edit.undoes !== null) {
      // An undo that was itself done again does not count any more.
      if (doneAgain.delete(edit.undoes)) continue
      cancelled.add(edit.undoes)
      if (isRedoOpen) takenBack.push(edit.undoes)
    } else if (edit.redoes !== null) {
      doneAgain.add(edit.redoes)
    } else if (!cancelled.delete(edit.id)) {
      undo ??= edit.id
      isRedoOpen = false
    }
    if (undo !== null && !isRedoOpen) break
  }
  return { undo, redo: takenBack[0] ?? null }
}
