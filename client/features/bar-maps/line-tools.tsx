import { dragBarLine, fillAhead, nudgeBarLine } from '@shared/timing/bar-map-gestures'
import type { BarMap } from '@shared/timing/bar-map'
import { timeWords } from '@shared/timing/time-words'
import type { BarMapBody } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { ActionRow, ActionRows } from '@client/features/bar-maps/action-row'
import type { BarEditorProps } from '@client/features/bar-maps/editor-props'
import { attempt } from '@client/features/bar-maps/use-bar-edits'

interface LineToolsProps extends Pick<BarEditorProps, 'edits' | 'player' | 'durationSec' | 'selection'> {
  body: BarMapBody
  barMap: BarMap
  bar: BarIndex
  playheadSec: Sec
}

const nudgeSec = 0.01
// A moment inside the bar, so that its own line is not taken for the end of the bar before.
const insideSec = 1e-6

/** What is done to the line of one bar, without dragging it. */
export function LineTools({ body, barMap, bar, playheadSec, edits, player, durationSec, selection }: LineToolsProps) {
  const lineSec = barMap.barSec(bar)
  const beatSec = 60 / barMap.tempoAt(lineSec + insideSec)
  const fixed = body.anchors.find(({ position }) => position.bar === bar && position.beat.n === position.beat.d)
  const fillsTo = selection && selection.endSec > lineSec ? selection.endSec : durationSec
  const nudge = (bySec: Sec) => edits.run((now) => nudgeBarLine(now, bar, bySec, freshId))
  return (
    <ActionRows>
      <ActionRow says={`Bar ${bar} then begins where the sound is, now ${timeWords(playheadSec)}.`}>
        <Button onClick={() => edits.run((now) => dragBarLine(now, bar, player.heardPosition, freshId))}>
          Put its line at the playhead
        </Button>
      </ActionRow>
      <ActionRow says="The lines fixed on either side stay where they are.">
        <Button onClick={() => nudge(-nudgeSec)}>10 ms earlier</Button>
        <Button onClick={() => nudge(nudgeSec)}>10 ms later</Button>
        <Button onClick={() => nudge(-beatSec)}>A beat earlier</Button>
        <Button onClick={() => nudge(beatSec)}>A beat later</Button>
      </ActionRow>
      <ActionRow says={`New lines up to ${timeWords(fillsTo)}, at the tempo of the four bars before this one.`}>
        <Button onClick={() => edits.run((now) => fillAhead(now, lineSec + insideSec, fillsTo, freshId))}>
          {fillsTo === durationSec ? 'Fill ahead to the end' : 'Fill ahead to the end of the selection'}
        </Button>
      </ActionRow>
      <ActionRow
        says={
          fixed
            ? 'The line is fixed. Let go of it and it stands evenly between the ones beside it.'
            : 'The line is not fixed: it stands evenly between the ones that are.'
        }
      >
        <Button
          disabled={!fixed}
          onClick={() => fixed && edits.run((now) => attempt(now, { kind: 'removeAnchor', id: fixed.id }))}
        >
          Let go of this line
        </Button>
      </ActionRow>
    </ActionRows>
  )
}
