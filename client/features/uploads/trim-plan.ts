// What the in-browser ffmpeg is asked to do with a recording before it is sent. Pure.
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** All of them shrink: about 1 MB a minute, or half of that. */
export type TrimFormat = 'opus' | 'small opus' | 'aac'

export interface TrimPlan {
  /** null: from the first to the last note. */
  span: Span | null
  format: TrimFormat
}

export const trimFormats: Record<
  TrimFormat,
  { label: string; note: string; kbps: number; ending: string; mime: string }
> = {
  opus: { label: 'Opus, good', note: 'about 1 MB a minute', kbps: 128, ending: 'opus', mime: 'audio/ogg' },
  'small opus': { label: 'Opus, small', note: 'half of that', kbps: 64, ending: 'opus', mime: 'audio/ogg' },
  aac: { label: 'AAC', note: 'where a program knows no Opus', kbps: 160, ending: 'm4a', mime: 'audio/mp4' }
}

/** Bytes to be expected, for saying so beforehand. */
export const plannedBytes = (lengthSec: Sec, format: TrimFormat): number =>
  Math.round((lengthSec * trimFormats[format].kbps * 1000) / 8)

/** Arguments for ffmpeg. Options before `-i` cut while reading: what is left out is never decoded. */
export const trimArguments = ({ span, format }: TrimPlan, from: string, to: string): string[] => [
  ...(span ? ['-ss', span.startSec.toFixed(3), '-t', (span.endSec - span.startSec).toFixed(3)] : []),
  '-i',
  from,
  '-vn',
  '-map',
  '0:a:0',
  // Names and places in the file's tags stay with the person who made it.
  '-map_metadata',
  '-1',
  '-c:a',
  format === 'aac' ? 'aac' : 'libopus',
  '-b:a',
  `${trimFormats[format].kbps}k`,
  // libopus outgrows the core's small stack at its usual 20 ms (ffmpegwasm issue 591, mended after 0.12.10).
  ...(format === 'aac' ? ['-movflags', '+faststart'] : ['-frame_duration', '10']),
  to
]

/** The new file's name. */
export const trimmedName = (name: string, format: TrimFormat): string =>
  `${name.replace(/\.[a-z0-9]{1,5}$/i, '') || 'recording'}.${trimFormats[format].ending}`

/** `1:23.4`, `83.4` or `1:02:03` as seconds; null for anything else. */
export const readTime = (text: string): Sec | null => {
  const match = /^(?:(?:(\d{1,2}):)?(\d{1,3}):)?(\d{1,5}(?:[.,]\d{1,3})?)$/.exec(text.trim())
  if (!match) return null
  const [hours, minutes, seconds] = [
    Number(match[1] ?? 0),
    Number(match[2] ?? 0),
    Number((match[3] ?? '').replace(',', '.'))
  ]
  return hours * 3600 + minutes * 60 + seconds
}

export const trimFault = (startSec: Sec | null, endSec: Sec | null, durationSec: Sec | null): string | null => {
  if (startSec === null || endSec === null) return 'Write times like 1:23.4.'
  if (endSec <= startSec) return 'The end comes before the start.'
  if (durationSec !== null && startSec >= durationSec) return 'That is after the end of the recording.'
  return null
}
