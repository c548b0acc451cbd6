import type { ChordStyle } from '@shared/music/chord-typeset'
import { Button } from '@client/ui/button'
import { Popover } from '@client/ui/popover'
import { RadioGroup } from '@client/ui/radio-group'
import { useChordStyle } from '@client/features/tunes/chord-style'

/** The reader's own handwriting: for every chart in this browser, for nobody else. */
export function ChordStyleChoice() {
  const [style, setStyle] = useChordStyle()
  const set = (part: Partial<ChordStyle>): void => setStyle({ ...style, ...part })
  return (
    <Popover
      label="How chords are written"
      align="end"
      renderTrigger={(props) => (
        <Button {...props} look="quiet">
          How chords are written
        </Button>
      )}
    >
      {() => (
        <div className="grid gap-3">
          <RadioGroup<ChordStyle['majorSeventh']>
            legend="Major seventh"
            inline
            value={style.majorSeventh}
            onChange={(majorSeventh) => set({ majorSeventh })}
            choices={[
              { value: 'maj7', label: 'Cmaj7' },
              { value: 'triangle', label: 'C△' }
            ]}
          />
          <RadioGroup<ChordStyle['minor']>
            legend="Minor"
            inline
            value={style.minor}
            onChange={(minor) => set({ minor })}
            choices={[
              { value: 'm', label: 'Cm7' },
              { value: 'minus', label: 'C−7' }
            ]}
          />
          <RadioGroup<ChordStyle['halfDiminished']>
            legend="Half diminished"
            inline
            value={style.halfDiminished}
            onChange={(halfDiminished) => set({ halfDiminished })}
            choices={[
              { value: 'ø', label: 'Cø' },
              { value: 'm7♭5', label: style.minor === 'm' ? 'Cm7♭5' : 'C−7♭5' }
            ]}
          />
          <RadioGroup<ChordStyle['diminished']>
            legend="Diminished"
            inline
            value={style.diminished}
            onChange={(diminished) => set({ diminished })}
            choices={[
              { value: '°', label: 'C°7' },
              { value: 'dim', label: 'Cdim7' }
            ]}
          />
        </div>
      )}
    </Popover>
  )
}
