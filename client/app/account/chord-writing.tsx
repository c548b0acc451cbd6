import { useId } from 'react'
import { readChord } from '@shared/music/chord'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { useChordStyle } from '@client/features/tunes/chord-style'
import { ChordSymbol } from '@client/ui/chord-symbol'
import { RadioGroup } from '@client/ui/radio-group'

const samples = ['Ebmaj7', 'Cm7', 'Dm7b5', 'F#dim7'].flatMap((text) => {
  const read = readChord(text)
  return read.ok ? [read.value] : []
})

/** The reader's hand for chord symbols, with four of them written in it. */
export function ChordWriting() {
  const [style, setStyle] = useChordStyle()
  const name = useId()
  const choice = <K extends keyof ChordStyle>(key: K, legend: string, first: Word<K>, second: Word<K>) => (
    <RadioGroup<ChordStyle[K]>
      legend={legend}
      name={`${name}-${key}`}
      inline
      value={style[key]}
      choices={[first, second]}
      onChange={(value) => setStyle({ ...style, [key]: value })}
    />
  )
  return (
    <div className="grid gap-4">
      <p className="flex flex-wrap gap-x-6 gap-y-2">
        {samples.map((chord) => (
          <ChordSymbol key={JSON.stringify(chord)} chord={chord} size={20} style={style} />
        ))}
      </p>
      <div className="grid max-w-md gap-3 sm:grid-cols-2">
        {choice('majorSeventh', 'Major seventh', { value: 'maj7', label: 'maj7' }, { value: 'triangle', label: '△' })}
        {choice('minor', 'Minor', { value: 'm', label: 'm' }, { value: 'minus', label: '−' })}
        {choice('halfDiminished', 'Half-diminished', { value: 'ø', label: 'ø' }, { value: 'm7♭5', label: 'm7♭5' })}
        {choice('diminished', 'Diminished', { value: '°', label: '°' }, { value: 'dim', label: 'dim' })}
      </div>
      <p className="text-sm text-pencil">
        As you see them in this browser. What anybody typed into a chart stays as it was typed.
      </p>
    </div>
  )
}

interface Word<K extends keyof ChordStyle> {
  value: ChordStyle[K]
  label: string
}
