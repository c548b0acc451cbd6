import { clickWords, ClickPattern, type ClickGrid } from '@shared/practice/click-pattern'
import type { CountInChoice } from '@shared/practice/count-in'
import type { ClickSettings } from '@shared/practice/preferences'
import type { Meter } from '@shared/timing/types'
import { Checkbox } from '@client/ui/checkbox'
import { Popover } from '@client/ui/popover'
import { Select, type Choice } from '@client/ui/select'
import { Slider } from '@client/ui/slider'
import { Part, WordsButton } from './part'

export interface ClickControls {
  settings: ClickSettings
  countIn: CountInChoice
  /** Of bar 1; null while no bars are laid. */
  meter: Meter | null
  /** The engine can click at all. */
  canClick: boolean
  change: (change: Partial<ClickSettings>) => void
  setCountIn: (choice: CountInChoice) => void
}

export const countInWords: Record<CountInChoice, string> = {
  none: 'no count-in',
  'one bar': 'counts one bar in',
  'two bars': 'counts two bars in'
}
const countIns: Choice<CountInChoice>[] = [
  { value: 'none', label: 'Start at once' },
  { value: 'one bar', label: 'Count one bar in' },
  { value: 'two bars', label: 'Count two bars in: 1, 3, then every beat' }
]
const countInOrder: CountInChoice[] = ['none', 'one bar', 'two bars']
export const nextCountIn = (choice: CountInChoice): CountInChoice =>
  countInOrder[(countInOrder.indexOf(choice) + 1) % countInOrder.length] ?? 'none'

/** Off and on, the pattern in words, and behind the words the rest. */
export function ClickPart({ click }: { click: ClickControls }) {
  const { settings, countIn, meter, canClick } = click
  const isUsable = canClick && meter !== null
  return (
    <Part label="Click">
      <ClickSwitch click={click} />
      {meter === null ? (
        <span className="text-pencil">once its bars are laid</span>
      ) : (
        <Popover
          label="Click and count-in"
          renderTrigger={(trigger) => (
            <WordsButton {...trigger} aria-haspopup="dialog" disabled={!isUsable}>
              {clickWords(settings, meter)}
              {countIn === 'none' ? null : ` · ${countInWords[countIn]}`}
            </WordsButton>
          )}
        >
          {() => (
            <div className="w-72 max-w-full">
              <ClickChoices click={click} />
            </div>
          )}
        </Popover>
      )}
    </Part>
  )
}

export const ClickSwitch = ({ click: { settings, meter, canClick, change } }: { click: ClickControls }) => (
  <Checkbox
    label="click"
    checked={settings.isOn && meter !== null && canClick}
    disabled={meter === null || !canClick}
    onChange={(isOn) => change({ isOn })}
  />
)

const divisions: (Choice & Pick<ClickGrid, 'subdivision' | 'swing'>)[] = [
  { value: '1', label: 'The beat alone', subdivision: 1 },
  { value: '2', label: 'In two', subdivision: 2 },
  { value: '2 swung', label: 'In two, swung 2 to 1', subdivision: 2, swing: 2 },
  { value: '3', label: 'In three', subdivision: 3 },
  { value: '4', label: 'In four', subdivision: 4 }
]
const silences: (Choice & Pick<ClickGrid, 'silence'>)[] = [
  { value: 'none', label: 'None', silence: null },
  ...([1, 3, 7] as const).map((heardBars) => ({
    value: `${heardBars}/1`,
    label: `Every ${{ 1: 'second', 3: 'fourth', 7: 'eighth' }[heardBars]} bar`,
    silence: { heardBars, silentBars: 1 }
  })),
  ...[2, 4].map((bars) => ({
    value: `${bars}/${bars}`,
    label: `${bars} bars heard, ${bars} silent`,
    silence: { heardBars: bars, silentBars: bars }
  }))
]
const silenceValue = ({ silence }: ClickGrid): string =>
  silence ? `${silence.heardBars}/${silence.silentBars}` : 'none'

export function ClickChoices({ click }: { click: ClickControls }) {
  const { settings, countIn, meter, canClick, change, setCountIn } = click
  const isOff = meter === null || !canClick
  const patterns = ClickPattern.options.map((value) => ({
    value,
    label: clickWords({ pattern: value, subdivision: 1, silence: null }, meter ?? undefined)
  }))
  const division =
    divisions.find(({ subdivision, swing }) => subdivision === settings.subdivision && swing === settings.swing) ??
    divisions.find(({ subdivision }) => subdivision === settings.subdivision)
  const silent = silenceValue(settings)
  // A silence chosen elsewhere stands in the list as well.
  const more = silences.some(({ value }) => value === silent)
    ? silences
    : [
        ...silences,
        { value: silent, label: silent.replace('/', ' bars heard, then silent: '), silence: settings.silence }
      ]
  return (
    <div className="grid gap-3">
      <Select
        label="It strikes"
        value={settings.pattern}
        choices={patterns}
        disabled={isOff}
        onChange={(pattern) => change({ pattern })}
      />
      <Select
        label="Each beat"
        value={division?.value ?? '1'}
        choices={divisions}
        disabled={isOff}
        onChange={(value) => {
          const chosen = divisions.find((one) => one.value === value)
          if (chosen) change({ subdivision: chosen.subdivision, swing: chosen.swing })
        }}
      />
      <Select
        label="Silent bars, to test your time"
        value={silent}
        choices={more}
        disabled={isOff}
        onChange={(value) => change({ silence: more.find((one) => one.value === value)?.silence ?? null })}
      />
      <Slider
        label="How loud it clicks"
        says={`${Math.round(settings.level * 100)} %`}
        value={Math.round(settings.level * 100)}
        min={0}
        max={100}
        disabled={isOff}
        onChange={(percent) => change({ level: percent / 100 })}
      />
      <Select label="Before the start" value={countIn} choices={countIns} disabled={isOff} onChange={setCountIn} />
    </div>
  )
}
