// Undo and redo against a naive model: two stacks, as every editor has them (common practice, no source).
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type HistoryEdit, nextInHistory } from '@shared/documents/history'

type Act = 'edit' | 'undo' | 'redo'

describe('nextInHistory', () => {
  it('names what two stacks would, after any sequence of edits, undos and redos', () => {
    const acts = fc.array(fc.constantFrom<Act>('edit', 'edit', 'undo', 'undo', 'redo'), { maxLength: 40 })
    fc.assert(
      fc.property(acts, (sequence) => {
        const edits: HistoryEdit[] = []
        const done: string[] = []
        let undone: string[] = []
        for (const [index, act] of sequence.entries()) {
          const id = `e${index}`
          const said = nextInHistory(edits.toReversed())
          expect(said).toEqual({ undo: done.at(-1) ?? null, redo: undone.at(-1) ?? null })
          if (act === 'edit') {
            edits.push({ id, undoes: null, redoes: null })
            done.push(id)
            undone = []
          } else if (act === 'undo' && said.undo !== null) {
            edits.push({ id, undoes: said.undo, redoes: null })
            undone.push(done.pop() ?? '')
          } else if (act === 'redo' && said.redo !== null) {
            edits.push({ id, undoes: null, redoes: said.redo })
            done.push(undone.pop() ?? '')
          }
        }
      }),
      { numRuns: 500 }
    )
  })
})
