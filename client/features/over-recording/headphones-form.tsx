import type { CountInChoice } from '@shared/practice/count-in'
import { Checkbox } from '@client/ui/checkbox'
import { RadioGroup } from '@client/ui/radio-group'
import { Select, type Choice } from '@client/ui/select'
import { Slider } from '@client/ui/slider'

/** `here`: on from the playhead. `once`: the selection, then it stops. `round`: the selection again and again. */
export type Where = 'here' | 'once' | 'round'

export interface HeadphoneChoice {
  hasTake: boolean
  /** 0.05 to 1, against the click. */
  takeLevel: number
  hasClick: boolean
  countIn: CountInChoice
  where: Where
}

export interface HeadphonesFormProps {
  choice: HeadphoneChoice
  onChange: (choice: HeadphoneChoice) => void
  /** Without bars there is nothing to click or count by. */
  hasBars: boolean
  /** The selection in words; null without one. */
  selectionWords: string | null
  hereWords: string
  speedWords: string
}

const countIns: Choice<CountInChoice>[] = [
  { value: 'none', label: 'Start at once' },
  { value: 'one bar', label: 'Count one bar in' },
  { value: 'two bars', label: 'Count two bars in' }
]

/** What is heard while playing, and which part of the take is played over. */
export function HeadphonesForm(props: HeadphonesFormProps) {
  const { choice, onChange, hasBars, selectionWords, hereWords, speedWords } = props
  const change = (part: Partial<HeadphoneChoice>) => onChange({ ...choice, ...part })
  const percent = Math.round(choice.takeLevel * 100)
  const wheres: Choice<Where>[] = [
    ...(selectionWords
      ? [
          {
            value: 'round' as const,
            label: `${selectionWords}, round and round`,
            note: 'Every time through is a try.'
          },
          { value: 'once' as const, label: `${selectionWords}, once` }
        ]
      : []),
    {
      value: 'here',
      label: `On from the playhead: ${hereWords}`,
      ...(selectionWords ? {} : { note: 'Select some bars to play them round and round.' })
    }
  ]
  return (
    <div className="grid gap-x-8 gap-y-4 sm:grid-cols-2">
      <fieldset className="grid min-w-0 content-start gap-3">
        <legend className="mb-1 text-sm text-pencil">In your headphones</legend>
        <div className="grid grid-cols-[auto_minmax(0,1fr)] items-center gap-x-4">
          <Checkbox label="The take" checked={choice.hasTake} onChange={(hasTake) => change({ hasTake })} />
          <Slider
            label="How loud"
            says={`${percent} %`}
            value={percent}
            min={5}
            max={100}
            step={5}
            disabled={!choice.hasTake}
            onChange={(next) => change({ takeLevel: next / 100 })}
          />
        </div>
        <Checkbox
          label="The click"
          checked={choice.hasClick && hasBars}
          disabled={!hasBars}
          hint={hasBars ? undefined : 'There is no click and no count-in before the bars of the take are laid.'}
          onChange={(hasClick) => change({ hasClick })}
        />
        <Select
          label="Before it starts"
          value={hasBars ? choice.countIn : 'none'}
          choices={countIns}
          disabled={!hasBars}
          onChange={(countIn) => change({ countIn })}
        />
      </fieldset>
      <div className="grid content-start gap-3">
        <RadioGroup
          legend="What you play over"
          value={wheres.some(({ value }) => value === choice.where) ? choice.where : 'here'}
          choices={wheres}
          onChange={(where) => change({ where })}
        />
        <p className="text-sm text-pencil">{speedWords}</p>
      </div>
    </div>
  )
}
