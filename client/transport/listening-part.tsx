import { lowFocusLimits, pitchLimits, type Channel } from '@shared/audio/listening'
import { Button } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { Popover } from '@client/ui/popover'
import { Select } from '@client/ui/select'
import { Slider } from '@client/ui/slider'
import { aidsWords, besideSwitches, centWords, channelWords, semitoneWords, tuningWords } from './aids-words'
import { ActButton, Part, WordsButton } from './part'
import { semitoneLimit, type AidsControls } from './use-aids'

const channels: Channel[] = ['both', 'left', 'right', 'middle', 'sides']

/** The two switches that are always at hand. */
export const OctaveSwitch = ({ aids, can, setOctaveUp }: AidsControls) => (
  <Checkbox label="octave up" checked={aids.isOctaveUp} disabled={!can.aids} onChange={setOctaveUp} />
)
export const LowFocusSwitch = ({ aids, can, setLowFocus }: AidsControls) => (
  <Checkbox label="low focus" checked={aids.lowFocus.isOn} disabled={!can.aids} onChange={setLowFocus} />
)

/** Switches, how everything is heard in words, and behind the words the rest. */
export function ListeningPart({ listening }: { listening: AidsControls }) {
  const { aids, semitones, can } = listening
  return (
    <Part label="Listening">
      <span className="pr-3">
        <OctaveSwitch {...listening} />
      </span>
      <span className="flex min-w-0 flex-wrap items-center gap-x-2">
        <LowFocusSwitch {...listening} />
        <Popover
          label="Listening"
          renderTrigger={(trigger) => (
            <WordsButton {...trigger} aria-haspopup="dialog" disabled={!can.aids && !can.pitch}>
              {besideSwitches(aids, semitones) ?? (aids.isOctaveUp ? 'nothing else' : 'as recorded')}
            </WordsButton>
          )}
        >
          {() => (
            <div className="w-72 max-w-full">
              <ListeningSettings listening={listening} />
            </div>
          )}
        </Popover>
      </span>
    </Part>
  )
}

export function ListeningSettings({ listening }: { listening: AidsControls }) {
  const { aids, semitones, can, topHz } = listening
  return (
    <div className="grid gap-3">
      <Slider
        label="Pitch"
        says={semitoneWords(semitones)}
        value={semitones}
        min={-semitoneLimit}
        max={semitoneLimit}
        bigStep={2}
        disabled={!can.pitch}
        onChange={listening.setSemitones}
      />
      <Slider
        label="Fine tune"
        says={centWords(aids.cents)}
        value={aids.cents}
        min={-pitchLimits.cents}
        max={pitchLimits.cents}
        disabled={!can.aids}
        onChange={listening.setCents}
      />
      <TuningOffer {...listening} />
      <Slider
        label="Low focus keeps what lies below"
        says={`${Math.round(topHz)} Hz`}
        value={topHz}
        min={lowFocusLimits.minHz}
        max={lowFocusLimits.maxHz}
        step={10}
        bigStep={100}
        disabled={!can.aids}
        onChange={listening.setTopHz}
      />
      <Select
        label="Listen to"
        value={aids.channel}
        choices={channels.map((value) => ({ value, label: channelWords[value] }))}
        disabled={!can.aids}
        onChange={listening.setChannel}
      />
      <Button disabled={aidsWords(aids, semitones) === null} onClick={listening.reset}>
        As recorded
      </Button>
    </div>
  )
}

/** Says how the take is tuned and mends it, so that it agrees with an instrument at A 440; and back. */
function TuningOffer({ aids, can, takeCents, setCents }: AidsControls) {
  if (takeCents === null) return null
  const isTuned = aids.cents === -takeCents
  return (
    <p className="flex flex-wrap items-center gap-x-3 text-sm text-pencil">
      {tuningWords(takeCents)}
      <ActButton disabled={!can.aids} onClick={() => setCents(isTuned ? 0 : -takeCents)}>
        {isTuned ? 'leave it as tuned' : 'tune it'}
      </ActButton>
    </p>
  )
}
