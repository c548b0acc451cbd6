import { useMemo } from 'react'
import type { ShownComment } from '@client/features/comments/changes'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import type { DeskModel } from './desk-model'

export interface BarsTableProps {
  title: string
  model: DeskModel
  comments: readonly ShownComment[]
  letters: ReadonlyMap<string, string>
  onGoTo: (sec: number) => void
  onClose: () => void
}

const cell = 'border-b border-rule py-1.5 pr-3 align-top'

/** What the lanes show, to be read: every bar with its moment, section, chords and comments (WCAG 2.2, 1.2.1). */
export function BarsTable({ title, model, comments, letters, onGoTo, onClose }: BarsTableProps) {
  const { barMap } = model
  const rows = useMemo(() => model.barRows(), [model])
  const saidIn = useMemo(() => {
    const byBar = new Map<number, ShownComment[]>()
    for (const comment of comments) {
      const bar = barMap?.barAt(comment.startSec) ?? 0
      byBar.set(bar, [...(byBar.get(bar) ?? []), comment])
    }
    return byBar
  }, [comments, barMap])
  return (
    <Dialog title={`Bars and chords of ${title}`} onClose={onClose} actions={<Button onClick={onClose}>Close</Button>}>
      {barMap ? (
        <table className="w-full border-collapse text-left text-sm">
          <thead>
            <tr className="text-pencil">
              <th scope="col" className={cell}>
                Bar
              </th>
              <th scope="col" className={cell}>
                Time
              </th>
              <th scope="col" className={cell}>
                Section
              </th>
              <th scope="col" className={cell}>
                Chords
              </th>
              <th scope="col" className={cell}>
                Comments
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map(({ bar, name, time, section, chords }) => (
              <tr key={bar}>
                <th scope="row" className={`${cell} font-normal`}>
                  <button
                    type="button"
                    className="min-h-6 text-left underline decoration-dotted underline-offset-2"
                    onClick={() => onGoTo(Math.max(0, barMap.barSec(bar)))}
                  >
                    {name}
                  </button>
                </th>
                <td className={`${cell} font-figures`}>{time}</td>
                <td className={cell}>{section}</td>
                <td className={cell}>{chords}</td>
                <td className={`${cell} break-words`}>
                  {(saidIn.get(bar) ?? []).map((comment) => (
                    <p key={comment.id}>
                      <strong className="font-semibold">{letters.get(comment.id)}</strong> {comment.text}
                    </p>
                  ))}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : (
        <p>
          No bars have been laid under this take yet. It lasts {Math.round(model.durationSec)} seconds and has{' '}
          {comments.length} comments.
        </p>
      )}
    </Dialog>
  )
}
