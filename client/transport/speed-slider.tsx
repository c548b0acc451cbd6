import { useState } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { Slider } from '@client/ui/slider'
import { rateLimits } from './player'

export interface SpeedSliderProps {
  rate: number
  /** Felt beats a minute at full speed where the line is; null without a bar map. */
  tempoNow: () => number | null
  /** Little room: "a minute" goes without its beats. */
  isShort?: boolean
  onRate: (rate: number) => void
}

const lookMs = 400

export const speedWords = (percent: number, tempo: number | null, isShort = false): string =>
  tempo === null
    ? `${percent} %`
    : `${percent} % · ${Math.round((tempo * percent) / 100)} ${isShort ? 'a minute' : 'beats a minute'}`

/** Percent, and what that makes of the tempo where the line is. */
export function SpeedSlider({ rate, tempoNow, isShort, onRate }: SpeedSliderProps) {
  const [tempo, setTempo] = useState(tempoNow)
  const latest = useLatest(tempoNow)
  useScope((scope) => {
    const look = () => {
      const now = latest.current()
      setTempo(now === null ? null : Math.round(now * 10) / 10)
    }
    look()
    scope.interval(look, lookMs)
  }, [])
  const percent = Math.round(rate * 100)
  return (
    <Slider
      label="Speed"
      says={speedWords(percent, tempo, isShort)}
      value={percent}
      min={rateLimits.min * 100}
      max={rateLimits.max * 100}
      step={1}
      bigStep={10}
      onChange={(value) => onRate(value / 100)}
    />
  )
}
