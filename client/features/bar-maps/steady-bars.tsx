import { useState } from 'react'
import { createBarGrid } from '@shared/timing/bar-grid'
import { writeMeter } from '@shared/timing/meter'
import { timeWords } from '@shared/timing/time-words'
import type { BarMapBody } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { TextField } from '@client/ui/text-field'
import type { BarEditorProps } from '@client/features/bar-maps/editor-props'
import { metersFor, planSteadyBars } from '@client/features/bar-maps/lay-bars'

interface SteadyBarsProps extends Pick<BarEditorProps, 'document' | 'player' | 'durationSec' | 'tune'> {
  body: BarMapBody
  playheadSec: Sec
}

const slowest = 20
const fastest = 400

/** For music that keeps its tempo: one number and one place lay every bar. */
export function SteadyBars({ body, document, player, durationSec, tune, playheadSec }: SteadyBarsProps) {
  const [text, setText] = useState(() => (tune?.tempo ? String(Math.round((tune.tempo.min + tune.tempo.max) / 2)) : ''))
  const [fault, setFault] = useState<string | null>(null)
  const meter = createBarGrid(metersFor(body, tune)).meterAt(1)

  const lay = (): void => {
    const tempo = Number(text.replace(',', '.'))
    if (!(tempo >= slowest && tempo <= fastest))
      return setFault(`A tempo from ${slowest} to ${fastest} beats a minute.`)
    const plan = planSteadyBars({ body, tune, durationSec, tempo, barOneSec: player.heardPosition, newId: freshId })
    setFault(plan.ok ? null : plan.error.message)
    if (plan.ok) document.edit(plan.value.operations)
  }
  return (
    <div className="grid gap-2">
      <div className="flex flex-wrap items-end gap-3">
        <div className="w-40">
          <TextField
            label="Beats a minute"
            inputMode="decimal"
            value={text}
            maxLength={6}
            onChange={(event) => setText(event.target.value)}
          />
        </div>
        <Button onClick={lay}>Bar 1 is here, at {timeWords(playheadSec)}</Button>
      </div>
      {fault ? (
        <p role="alert" className="text-sm text-fault">
          <span aria-hidden="true">! </span>
          {fault}
        </p>
      ) : null}
      <p className="text-sm text-pencil">
        Bars of {writeMeter(meter)} at that tempo from the playhead to the end. Each line can be moved afterwards.
      </p>
    </div>
  )
}
