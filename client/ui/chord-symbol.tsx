import type { Chord } from '@shared/music/chord'
import { typesetChord } from '@shared/music/chord-typeset'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { chordWords } from '@shared/music/chord-words'
import { chordRuns } from './chord-runs'
import { cx } from './classes'

export interface ChordSymbolProps {
  chord: Chord
  /** The reader's handwriting. */
  style?: ChordStyle
  /** The chord of a bar that repeats the one before: shown, but faint. */
  faint?: boolean
  /** An implied chord. */
  claim?: boolean
  /** Height of the root in pixels; that of the words around it if not given. */
  size?: number
}

/** A chord, set: root, quality, raised extensions, bass. Spoken in words. */
export function ChordSymbol({ chord, style, faint = false, claim = false, size }: ChordSymbolProps) {
  return (
    <span
      // Set type, not a picture file: no tag for that.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="img"
      aria-label={chordWords(chord)}
      className={cx(
        'inline-block leading-none whitespace-nowrap',
        faint ? 'text-faint' : claim ? 'text-claim' : 'text-ink'
      )}
      style={size === undefined ? undefined : { fontSize: `${size}px` }}
    >
      {chordRuns(typesetChord(chord, style)).map((run, index) => (
        <span
          // A run has no name but its place in the chord.
          // oxlint-disable-next-line react/no-array-index-key
          key={index}
          className={run.face === 'signs' ? 'font-signs' : undefined}
          style={{
            fontSize: `${run.scale}em`,
            fontWeight: faint ? 400 : run.weight,
            // Relative, so that a raised figure does not change the height of the line. Both in the run's own size.
            position: 'relative',
            top: `${-run.rise / run.scale}em`,
            marginLeft: `${run.gap / run.scale}em`
          }}
        >
          {run.text}
        </span>
      ))}
    </span>
  )
}
