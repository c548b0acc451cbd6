import { useState } from 'react'
import { createBarGrid } from '@shared/timing/bar-grid'
import { emptyBarMap } from '@shared/timing/bar-map-document'
import { setBarOneAt, setPickUp, shiftByPulses } from '@shared/timing/bar-map-gestures'
import { readMeter, writeMeter } from '@shared/timing/meter'
import type { BarMapBody } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'
import { Button } from '@client/ui/button'
import { Sentence, SentenceNumber } from '@client/ui/sentence'
import { TextField } from '@client/ui/text-field'
import { ActionRow, ActionRows } from '@client/features/bar-maps/action-row'
import type { BarEditorProps } from '@client/features/bar-maps/editor-props'
import { attempt } from '@client/features/bar-maps/use-bar-edits'

interface CountToolsProps extends Pick<BarEditorProps, 'edits' | 'player'> {
  body: BarMapBody
  bar: BarIndex
}

/** Which number a bar has, and how long bars are: the sound of the lines stays where it is. */
export function CountTools({ body, bar, edits, player }: CountToolsProps) {
  const [pickUp, setPickUpBeats] = useState(1)
  return (
    <ActionRows>
      <ActionRow says="The beat nearest the playhead is bar 1, beat 1; bars before it count 0, −1 and so on.">
        <Button onClick={() => edits.run((now) => setBarOneAt(now, player.heardPosition))}>
          Bar 1 is at the playhead
        </Button>
      </ActionRow>
      <ActionRow says="The music begins at the playhead with so many beats before bar 1.">
        <Button onClick={() => edits.run((now) => setPickUp(now, player.heardPosition, pickUp))}>
          A pick-up starts at the playhead
        </Button>
        <Sentence label="Pick-up">
          {'of '}
          <SentenceNumber label="beats of the pick-up" min={1} max={16} value={pickUp} onChange={setPickUpBeats} />
          {pickUp === 1 ? ' beat' : ' beats'}
        </Sentence>
      </ActionRow>
      <ActionRow says="For when 1 was heard on the wrong beat: every line moves over by one beat of the music.">
        <Button onClick={() => edits.run((now) => shiftByPulses(now, 1))}>1 is a beat earlier</Button>
        <Button onClick={() => edits.run((now) => shiftByPulses(now, -1))}>1 is a beat later</Button>
      </ActionRow>
      <ActionRow says="For when the tempo was counted twice too fast or too slow. Bar 1 stays.">
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'halve' }))}>Half as many beats</Button>
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'double' }))}>Twice as many beats</Button>
      </ActionRow>
      <ActionRow says="A bar that was not counted goes in; a bar that was counted too much goes out. Later bars follow.">
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'insertBar', bar }))}>
          Add a bar at bar {bar}
        </Button>
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'removeBar', bar }))}>Take out bar {bar}</Button>
      </ActionRow>
      <MeterRow key={`${bar}`} body={body} bar={bar} edits={edits} />
      <ActionRow says="Every line, meter and mark of the form goes. Undo brings them back.">
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'setAll', body: emptyBarMap }))}>
          Clear all bars
        </Button>
      </ActionRow>
    </ActionRows>
  )
}

function MeterRow({ body, bar, edits }: Omit<CountToolsProps, 'player'>) {
  const [text, setText] = useState(() => writeMeter(createBarGrid(body.meters).meterAt(bar)))
  const [fault, setFault] = useState<string | null>(null)
  const changesHere = body.meters.findIndex((mark) => mark.bar === bar) > 0
  const use = (): void => {
    const meter = readMeter(text)
    setFault(meter ? null : `“${text}” is not a meter; write 4/4, 3/4, 6/8 …`)
    if (meter) edits.run((now) => attempt(now, { kind: 'setMeter', bar, meter }))
  }
  return (
    <ActionRow says="Felt beats stay where they sound and are grouped into the new bars, up to the next change.">
      <div className="w-24">
        <TextField
          label={`Meter from bar ${bar}`}
          labelHidden
          fault={fault}
          value={text}
          maxLength={8}
          onChange={(event) => setText(event.target.value)}
          onKeyDown={(event) => {
            if (event.key !== 'Enter') return
            event.preventDefault()
            use()
          }}
        />
      </div>
      <Button onClick={use}>Meter from bar {bar}</Button>
      {changesHere ? (
        <Button onClick={() => edits.run((now) => attempt(now, { kind: 'removeMeter', bar }))}>
          Take the change out
        </Button>
      ) : null}
    </ActionRow>
  )
}
