import { Popover } from '@client/ui/popover'
import { Slider } from '@client/ui/slider'
import { hearingNote } from './hearing'

export interface VolumeProps {
  /** 0 to 1. */
  volume: number
  onVolume: (volume: number) => void
}

export const VolumeSlider = ({ volume, onVolume }: VolumeProps) => (
  <Slider
    label="Volume"
    says={`${Math.round(volume * 100)} %`}
    value={Math.round(volume * 100)}
    min={0}
    max={100}
    step={1}
    onChange={(value) => onVolume(value / 100)}
  />
)

/** The note that belongs beside every volume control. */
export const SafeListening = () => (
  <Popover
    label="Safe listening"
    align="end"
    renderTrigger={(trigger) => (
      <button
        {...trigger}
        type="button"
        aria-label="How loud, and how long?"
        className="min-h-8 rounded px-1 text-left text-xs leading-4 text-pencil underline decoration-dotted underline-offset-2 hover:text-ink"
      >
        how loud,
        <br />
        how long?
      </button>
    )}
  >
    {() => <p className="max-w-72 text-sm">{hearingNote}</p>}
  </Popover>
)
