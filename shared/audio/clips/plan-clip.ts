// How long a clip is, which part of the take it needs and where its clicks fall. In the take's own frames.
import { totalSemitones } from '@shared/audio/listening'
import { pitchRatio } from '@shared/audio/stretch/offline'
import type { ClipSettings } from '@shared/contracts/clips'
import { clicksFor } from '@shared/practice/click-pattern'
import { countInFor } from '@shared/practice/count-in'
import type { BarMap } from '@shared/timing/bar-map'
import type { Sec } from '@shared/units'

export interface ClipClick {
  /** Of the clip. */
  frame: number
  accent: 0 | 1 | 2
}

export interface ClipPlan {
  /** Before the passage: the count-in. */
  leadFrames: number
  totalFrames: number
  /** First frame of the take in the passage, with its fraction. */
  startFrame: number
  rate: number
  /** Of pitch, 2 is an octave up. */
  ratio: number
  /** Rising. */
  clicks: ClipClick[]
}

/** Seconds a clip lasts, its count-in included. Without a bar map there is no count-in. */
export const clipSec = ({ span, rate, countIn }: ClipSettings, map: BarMap | null): Sec =>
  (countInFor(map, span.startSec, rate, countIn)?.leadSec ?? 0) + (span.endSec - span.startSec) / rate

/** The plan at a sample rate. Clicks need a bar map; without one there are none. */
export const planClip = (settings: ClipSettings, map: BarMap | null, sampleRate: number): ClipPlan => {
  const { span, rate, click, countIn } = settings
  const counted = countInFor(map, span.startSec, rate, countIn)
  const leadFrames = Math.round((counted?.leadSec ?? 0) * sampleRate)
  const counts = (counted?.clicks ?? []).map(({ atSec, accent }) => ({
    frame: Math.max(0, leadFrames + Math.round(atSec * sampleRate)),
    accent
  }))
  const laid = (map && click ? clicksFor(map, click, span) : []).map(({ sec, accent }) => ({
    frame: leadFrames + Math.max(0, Math.round(((sec - span.startSec) * sampleRate) / rate)),
    accent
  }))
  return {
    leadFrames,
    totalFrames: leadFrames + Math.round(((span.endSec - span.startSec) * sampleRate) / rate),
    startFrame: span.startSec * sampleRate,
    rate,
    ratio: pitchRatio(totalSemitones(settings.semitones, settings.aids)),
    clicks: [...counts, ...laid].sort((a, b) => a.frame - b.frame)
  }
}
