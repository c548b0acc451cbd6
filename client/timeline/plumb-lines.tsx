// The plumb line: the playhead through all lanes, with its bob under the last one. Moved at frame rate by transform alone.
import { useRef, type KeyboardEvent, type PointerEvent } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { cx } from '@client/ui/classes'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import { secToX, xToSec } from './geometry'
import type { LineSource } from './timeline-types'
import type { ViewStore } from './view-store'

export const bobPx = 26

export interface PlumbLinesProps {
  store: ViewStore
  player: Player
  lines: readonly LineSource[]
  valueText: (sec: Sec) => string
  onSeek: (sec: Sec) => void
  onKey: (event: KeyboardEvent) => void
  /** Brings the line into view when it gets the focus. */
  onShow: (sec: Sec) => void
  /** Called with the leading line's place on every frame that moves it. */
  onMoved: (sec: Sec) => void
}

export function PlumbLines({ store, player, lines, valueText, onSeek, onKey, onShow, onMoved }: PlumbLinesProps) {
  const boxes = useRef<(HTMLDivElement | null)[]>([])
  const bob = useRef<HTMLDivElement>(null)
  const latest = useLatest({ lines, valueText, onMoved })
  const hasSession = lines.some(({ kind }) => kind === 'session')

  useScope(
    (scope) => {
      let toldSec = -1
      const drawn: number[] = []
      const paint = () => {
        const view = store.get()
        for (const [index, line] of latest.current.lines.entries()) {
          const box = boxes.current[index]
          if (!box) continue
          const sec = line.positionSec()
          const x = Math.round(secToX(view, sec) * 4) / 4
          if (drawn[index] === x) continue
          drawn[index] = x
          const isOut = x < -1 || x > view.widthPx + 1
          box.style.transform = `translateX(${x}px)`
          box.style.visibility = isOut && line.kind === 'session' ? 'hidden' : ''
          box.style.opacity = isOut ? '0' : ''
        }
      }
      const tell = () => {
        const own = latest.current.lines.find(({ kind }) => kind === 'own')
        const handle = bob.current
        if (!own || !handle) return
        const sec = Math.round(own.positionSec() * 10) / 10
        if (sec === toldSec) return
        toldSec = sec
        handle.setAttribute('aria-valuenow', String(sec))
        handle.setAttribute('aria-valuetext', latest.current.valueText(sec))
      }
      const step = () => {
        const leading = latest.current.lines.find(({ kind }) => kind === 'own')
        if (leading && player.state === 'playing') latest.current.onMoved(leading.positionSec())
        paint()
      }
      let stopFrames = () => {}
      const runOrRest = () => {
        stopFrames()
        stopFrames = () => {}
        if (player.state === 'playing' || hasSession) stopFrames = scope.eachFrame(step)
        else step()
        tell()
      }
      runOrRest()
      scope.add(player.on('state', runOrRest))
      scope.add(
        player.on('jump', ({ positionSec }) => {
          latest.current.onMoved(positionSec)
          paint()
          tell()
        })
      )
      scope.add(store.subscribe(paint))
      // Once a second is enough for a screen reader, which would otherwise never stop talking.
      scope.interval(tell, 1000)
    },
    [store, player, hasSession, lines.length]
  )

  const handleDown = (event: PointerEvent<HTMLDivElement>) => {
    if (event.button !== 0) return
    event.currentTarget.setPointerCapture(event.pointerId)
  }
  const handleMove = (event: PointerEvent<HTMLDivElement>) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return
    const lanes = event.currentTarget.closest('[data-lanes]')?.getBoundingClientRect()
    if (lanes) onSeek(xToSec(store.get(), event.clientX - lanes.left))
  }

  return lines.map((line, index) => {
    const isBrass = line.kind === 'session' || !hasSession
    const colour = isBrass ? 'text-brass' : 'text-ink'
    return (
      <div
        key={line.kind}
        ref={(box) => {
          boxes.current[index] = box
        }}
        className={cx('pointer-events-none absolute inset-y-0 left-0 w-0', colour)}
        data-line={line.kind}
      >
        <span
          className="absolute top-0 -left-[0.75px] w-[1.5px] bg-current shadow-[0_0_0_2px_var(--sheet)]"
          style={{ bottom: bobPx - 10 }}
        />
        {line.label ? (
          <span
            className={cx(
              'absolute top-0 left-0 max-w-32 -translate-x-1/2 truncate px-2 text-xs font-semibold whitespace-nowrap text-sheet',
              isBrass ? 'bg-brass' : 'bg-ink'
            )}
          >
            {line.label}
          </span>
        ) : null}
        {line.kind === 'own' ? (
          <div
            ref={bob}
            // A line through all lanes: no input element can look like it.
            // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
            role="slider"
            tabIndex={0}
            aria-label="Place in the take"
            aria-valuemin={0}
            aria-valuemax={Math.round(store.get().durationSec * 10) / 10}
            aria-valuenow={0}
            onKeyDown={onKey}
            onFocus={() => onShow(line.positionSec())}
            onPointerDown={handleDown}
            onPointerMove={handleMove}
            className="pointer-events-auto absolute bottom-0 -left-3 flex h-[26px] w-6 cursor-ew-resize touch-none justify-center"
          >
            <Bob />
          </div>
        ) : (
          <span className="absolute bottom-0 -left-3 flex h-[26px] w-6 justify-center">
            <Bob />
          </span>
        )}
      </div>
    )
  })
}

const Bob = () => (
  <svg width="14" height="22" viewBox="0 0 14 22" aria-hidden="true" className="mt-0.5" fill="currentColor">
    <path d="M7 1 13 8.5 7 21 1 8.5z" stroke="var(--sheet)" strokeWidth="1" />
  </svg>
)
