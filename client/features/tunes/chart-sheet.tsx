// The chart as a lead sheet: a row a phrase, the section's name in the margin, bar numbers above, repeated chords faint.
import { useRef, useState, type KeyboardEvent } from 'react'
import type { ChartOperation } from '@shared/music/chart-schema'
import { chartDocument } from '@shared/music/chart-document'
import { formOf } from '@shared/music/form'
import type { InstrumentPitch } from '@shared/music/transpose'
import type { ChartBody } from '@shared/music/types'
import { beatsPerBar } from '@shared/timing/meter'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { Button } from '@client/ui/button'
import { cx } from '@client/ui/classes'
import { BarCell, CellFrame } from '@client/features/tunes/chart-bar-cell'
import { ChartBarField } from '@client/features/tunes/chart-bar-field'
import { chartRows, phraseBars, type ChartCell } from '@client/features/tunes/chart-rows'

export interface ChartSheetProps {
  body: ChartBody
  style: ChordStyle
  pitch?: InstrumentPitch
  /** Left out for those who may only read. */
  onEdit?: (operations: ChartOperation[]) => void
}

export function ChartSheet({ body, style, pitch = 'C', onEdit }: ChartSheetProps) {
  const rows = chartRows(body, pitch)
  const cells = rows.flatMap((row) => row.cells)
  const beats = beatsPerBar(formOf(body).meter)
  const [chosenKey, setChosen] = useState<string | null>(null)
  const [editing, setEditing] = useState<string | null>(null)
  const [focusOn, setFocusOn] = useState<string | null>(null)
  const sheet = useRef<HTMLDivElement>(null)
  const chosen = cells.find(({ key }) => key === chosenKey) ?? null
  const stop = chosen?.key ?? cells[0]?.key

  const begin = (cell: ChartCell): void => {
    setChosen(cell.key)
    setFocusOn(null)
    setEditing(cell.key)
  }
  const leave = (cell: ChartCell, byKey: boolean): void => {
    setEditing((now) => (now === cell.key ? null : now))
    if (byKey) setFocusOn(cell.key)
  }
  const move = (from: ChartCell, step: 1 | -1): void => {
    const next = cells[cells.indexOf(from) + step]
    if (next) begin(next)
    else leave(from, true)
  }
  const focusCell = (cell: ChartCell | undefined): void => {
    const buttons = [...(sheet.current?.querySelectorAll<HTMLElement>('[data-cell]') ?? [])]
    buttons.find(({ dataset }) => dataset['cell'] === cell?.key)?.focus()
  }
  const handleKey = (event: KeyboardEvent<HTMLButtonElement>, cell: ChartCell): void => {
    const at = cells.indexOf(cell)
    const steps: Record<string, number> = { ArrowRight: at + 1, ArrowLeft: at - 1, Home: 0, End: cells.length - 1 }
    const to = steps[event.key] ?? lineStep(event.key, event.currentTarget, sheet.current)
    if (to !== undefined) {
      event.preventDefault()
      focusCell(cells[to])
    } else if (event.key === 'F2') {
      event.preventDefault()
      begin(cell)
    } else if (event.key === 'Delete') {
      event.preventDefault()
      onEdit?.([{ kind: 'removeBar', sectionId: cell.sectionId, index: cell.index }])
      setFocusOn(cells[at + 1]?.key ?? cells[at - 1]?.key ?? null)
    }
  }

  return (
    <div className="grid gap-3">
      <div ref={sheet} className="@container grid gap-5">
        {rows.map((row, i) => (
          <div key={row.key} className="grid gap-x-2 @md:grid-cols-[4rem_minmax(0,1fr)]">
            <div className="flex min-w-0 items-baseline gap-2 @md:block @md:pt-6">
              <h3 className="text-base font-semibold break-words">{row.name}</h3>
              {row.played || rows[i - 1]?.played === false ? null : <p className="text-xs text-pencil">not played</p>}
            </div>
            <div
              role="group"
              aria-label={row.played ? `${row.cells[0]?.name.replace(/^Bar 1 of /u, '') ?? row.name}` : row.name}
              className={cx(
                'grid grid-cols-2 gap-y-1 @md:grid-cols-4',
                phraseBars(row.cells.length) === 8 && '@4xl:grid-cols-8'
              )}
            >
              {row.cells.map((cell, index) => {
                const isLast = index === row.cells.length - 1
                if (cell.key === editing && onEdit)
                  return (
                    <CellFrame key={cell.key} cell={cell} isLast={isLast}>
                      <div className="px-1">
                        <ChartBarField
                          body={body}
                          sectionId={cell.sectionId}
                          index={cell.index}
                          label={pitch === 'C' ? cell.name : `${cell.name}, as it sounds`}
                          onKeep={(text) =>
                            onEdit([{ kind: 'setBar', sectionId: cell.sectionId, index: cell.index, text }])
                          }
                          onMove={(step) => move(cell, step)}
                          onClose={(byKey) => leave(cell, byKey)}
                        />
                      </div>
                    </CellFrame>
                  )
                return (
                  <BarCell
                    key={cell.key}
                    cell={cell}
                    style={style}
                    beats={beats}
                    isLast={isLast}
                    isStop={cell.key === stop}
                    isChosen={onEdit !== undefined && cell.key === chosen?.key}
                    takesFocus={cell.key === focusOn}
                    {...(onEdit
                      ? {
                          edit: {
                            onEdit: () => begin(cell),
                            onChoose: () => setChosen(cell.key),
                            onKey: (event: KeyboardEvent<HTMLButtonElement>) => handleKey(event, cell)
                          }
                        }
                      : {})}
                  />
                )
              })}
            </div>
          </div>
        ))}
      </div>
      {onEdit && chosen ? <ChosenBar body={body} cell={chosen} onEdit={onEdit} /> : null}
    </div>
  )
}

/** The cell a line further up or down, by where it stands: lines are as long as the window allows. */
const lineStep = (key: string, from: HTMLElement, sheet: HTMLElement | null): number | undefined => {
  if (key !== 'ArrowUp' && key !== 'ArrowDown') return undefined
  const all = [...(sheet?.querySelectorAll<HTMLElement>('[data-cell]') ?? [])]
  const here = from.getBoundingClientRect()
  const way = key === 'ArrowDown' ? 1 : -1
  const candidates = all
    .map((element, index) => ({ index, box: element.getBoundingClientRect() }))
    .filter(({ box }) => (box.top - here.top) * way > here.height / 2)
    .sort(
      (a, b) =>
        Math.abs(a.box.top - here.top) - Math.abs(b.box.top - here.top) ||
        Math.abs(a.box.left - here.left) - Math.abs(b.box.left - here.left)
    )
  return candidates[0]?.index
}

interface ChosenBarProps {
  body: ChartBody
  cell: ChartCell
  onEdit: (operations: ChartOperation[]) => void
}

/** What can be done with the bar last looked at, besides typing in it. */
function ChosenBar({ body, cell, onEdit }: ChosenBarProps) {
  const { sectionId, index } = cell
  const times = body.order.filter((id) => id === sectionId).length
  const insert = (at: number): ChartOperation => ({ kind: 'insertBar', sectionId, index: at, text: '%' })
  const canInsert = (at: number): boolean => chartDocument.apply(body, insert(at)).ok
  return (
    <div role="group" aria-label={cell.name} className="grid gap-1 border-t border-rule pt-2">
      <div className="flex flex-wrap items-center gap-x-2 gap-y-1">
        <span className="mr-1 text-pencil">{cell.name}</span>
        <Button look="quiet" icon="plus" disabled={!canInsert(index)} onClick={() => onEdit([insert(index)])}>
          A bar before it
        </Button>
        <Button look="quiet" icon="plus" disabled={!canInsert(index + 1)} onClick={() => onEdit([insert(index + 1)])}>
          A bar after it
        </Button>
        <Button look="quiet" icon="bin" onClick={() => onEdit([{ kind: 'removeBar', sectionId, index }])}>
          Take it out
        </Button>
      </div>
      {times > 1 ? (
        <p className="text-sm text-pencil">This section is played {times} times: what changes here changes in all.</p>
      ) : null}
    </div>
  )
}
