import type { KeyboardEvent, ReactNode, Ref } from 'react'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { chordWords } from '@shared/music/chord-words'
import { ChordSymbol } from '@client/ui/chord-symbol'
import { cx } from '@client/ui/classes'
import { Figures } from '@client/ui/figures'
import type { ChartCell } from '@client/features/tunes/chart-rows'

interface CellFrameProps {
  cell: ChartCell
  isLast: boolean
  children: ReactNode
}

/** The bar line on the left, the number above; the last bar of a section has its own line on the right. */
export function CellFrame({ cell, isLast, children }: CellFrameProps) {
  return (
    <div className={cx('grid min-w-0 content-start border-l border-pencil pb-1', isLast && 'border-r')}>
      <span className="h-5 pl-1.5 text-xs text-pencil" aria-hidden="true">
        {cell.formBar === null ? '' : <Figures>{cell.formBar}</Figures>}
      </span>
      {children}
    </div>
  )
}

interface BarChordsProps {
  cell: ChartCell
  style: ChordStyle
  beats: number
}

/** Chords where they fall in the bar, never one over another. */
function BarChords({ cell, style, beats }: BarChordsProps) {
  const { chords } = cell
  return (
    <span
      className="grid min-w-0 flex-1 items-baseline gap-x-1.5"
      style={{
        gridTemplateColumns: chords
          .map(({ beat }, i) => `minmax(min-content, ${Math.max(0.5, (chords[i + 1]?.beat ?? beats + 1) - beat)}fr)`)
          .join(' ')
      }}
    >
      {chords.map(({ beat, chord, faint }) => (
        <ChordSymbol key={beat} chord={chord} faint={faint} style={style} size={chords.length > 2 ? 17 : 21} />
      ))}
    </span>
  )
}

export const cellWords = ({ chords }: ChartCell): string =>
  chords.length === 0 ? 'nothing written' : chords.map(({ chord }) => chordWords(chord)).join(', then ')

interface BarCellProps extends BarChordsProps {
  isLast: boolean
  isStop: boolean
  isChosen: boolean
  takesFocus: boolean
  /** Left out for those who may only read. */
  edit?: { onEdit(): void; onChoose(): void; onKey(event: KeyboardEvent<HTMLButtonElement>): void }
  buttonRef?: Ref<HTMLButtonElement>
}

export function BarCell({ cell, style, beats, isLast, isStop, isChosen, takesFocus, edit, buttonRef }: BarCellProps) {
  const chords = <BarChords cell={cell} style={style} beats={beats} />
  if (!edit)
    return (
      <CellFrame cell={cell} isLast={isLast}>
        <div className="flex min-h-10 items-center px-1.5">{chords}</div>
      </CellFrame>
    )
  return (
    <CellFrame cell={cell} isLast={isLast}>
      <button
        ref={buttonRef}
        type="button"
        // Where the focus was before the bar was edited.
        // oxlint-disable-next-line jsx-a11y/no-autofocus
        autoFocus={takesFocus}
        data-cell={cell.key}
        tabIndex={isStop ? 0 : -1}
        aria-label={`${cell.name}: ${cellWords(cell)}`}
        className={cx(
          'flex min-h-10 w-full items-center px-1.5 text-left -outline-offset-2 hover:bg-wash',
          isChosen && 'bg-wash'
        )}
        onClick={edit.onEdit}
        onFocus={edit.onChoose}
        onKeyDown={edit.onKey}
      >
        {chords}
      </button>
    </CellFrame>
  )
}
