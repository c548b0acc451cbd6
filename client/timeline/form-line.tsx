// A grid whose rows break by width and whose cells lie under one hand: not a table's layout, so roles on plain boxes.
// oxlint-disable jsx-a11y/prefer-tag-over-role
import { memo } from 'react'
import { cx } from '@client/ui/classes'
import type { SectionStart } from '@shared/timing/sections'
import type { BarIndex } from '@shared/units'
import type { StripLine } from './form-grid'
import type { BarComments } from './form-strip'

export interface FormLineProps {
  line: StripLine
  perLine: number
  name: string
  /** Names set into the cells where sections start, for rows that had to be broken. */
  sections: readonly SectionStart[]
  /** Null while the line is elsewhere, so that only two lines draw when it moves on. */
  currentBar: BarIndex | null
  stopBar: BarIndex | null
  selectedBars: ReadonlySet<BarIndex>
  wash: ReadonlyMap<BarIndex, number>
  commentsOf: (bar: BarIndex) => BarComments
  barName: (bar: BarIndex) => string
}

export const FormLine = memo(function FormLine(props: FormLineProps) {
  const { line, perLine, name, sections } = props
  return (
    <div role="row" className="flex flex-wrap items-stretch sm:flex-nowrap">
      {name ? (
        <span role="rowheader" className="w-full flex-none self-center text-sm text-pencil sm:w-[4.5rem]">
          {name}
        </span>
      ) : (
        <span className="hidden w-[4.5rem] flex-none sm:block" />
      )}
      <div
        role="presentation"
        className="grid w-full min-w-0 sm:w-auto sm:flex-1"
        style={{ gridTemplateColumns: `repeat(${perLine}, minmax(0, 1fr))` }}
      >
        {line.cells.map(({ bar, formBar, column }) => (
          <Cell
            key={bar}
            bar={bar}
            column={column - line.firstColumn + 1}
            section={sections.find((each) => each.formBar === formBar)?.name ?? ''}
            isCurrent={bar === props.currentBar}
            isStop={bar === props.stopBar}
            isSelected={props.selectedBars.has(bar)}
            wash={props.wash.get(bar) ?? 0}
            comments={props.commentsOf(bar)}
            label={props.barName(bar)}
          />
        ))}
      </div>
    </div>
  )
})

interface CellProps {
  bar: BarIndex
  column: number
  section: string
  isCurrent: boolean
  isStop: boolean
  isSelected: boolean
  wash: number
  comments: BarComments
  label: string
}

function Cell({ bar, column, section, isCurrent, isStop, isSelected, wash, comments, label }: CellProps) {
  const words = [label, commentWords(comments), isCurrent ? 'the line is here' : ''].filter(Boolean).join(', ')
  return (
    <div
      role="gridcell"
      data-bar={bar}
      tabIndex={isStop ? 0 : -1}
      aria-label={words}
      title={words}
      aria-selected={isSelected}
      aria-current={isCurrent ? 'location' : undefined}
      className="relative h-[27px] cursor-pointer border-r-2 border-sheet bg-paper"
      style={{ gridColumnStart: column }}
    >
      <span className="absolute inset-x-0 bottom-0 bg-rule/60" style={{ height: `${Math.round(wash * 88)}%` }} />
      {isSelected ? <span className="absolute inset-0 border-[1.5px] border-ink" /> : null}
      {comments.open > 0 ? <span className="absolute top-1 left-1 h-2 w-[2.5px] bg-claim" /> : null}
      {comments.settled > 0 ? (
        <span
          className={cx(
            'absolute top-1 h-2 border-l-2 border-dotted border-pencil',
            comments.open > 0 ? 'left-2.5' : 'left-1'
          )}
        />
      ) : null}
      {section ? <span className="absolute bottom-0 left-1 text-xs leading-4 font-semibold">{section}</span> : null}
      {isCurrent ? <span className="absolute inset-x-0 -bottom-1 h-[3px] bg-brass" /> : null}
    </div>
  )
}

const commentWords = ({ open, settled }: BarComments): string => {
  const all = open + settled
  if (all === 0) return ''
  return `${all} comment${all === 1 ? '' : 's'}${open > 0 && settled > 0 ? `, ${open} open` : ''}${settled === 0 ? ', open' : ''}`
}
