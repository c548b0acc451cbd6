// What was measured, kept in this browser for each way in and out. Nothing personal: it is the machine's.
import { z } from 'zod'
import type { Sec } from '@shared/units'

export interface KeptDelay {
  delaySec: Sec
  /** ms since 1970. */
  measuredMs: number
}

const storageKey = 'plumbline.delays'
/** Older ones are dropped: nobody has so many devices at hand. */
const mostKept = 12

const Stored = z.record(z.string(), z.object({ delaySec: z.number().min(-0.1).max(1), measuredMs: z.number() }))
type Stored = z.infer<typeof Stored>

const stored = (): Stored => {
  try {
    return Stored.parse(JSON.parse(localStorage.getItem(storageKey) ?? '{}'))
  } catch {
    // Nothing kept, or storage switched off.
    return {}
  }
}

export const keptDelay = (way: string): KeptDelay | null => stored()[way] ?? null

export const keepDelay = (way: string, kept: KeptDelay): void => {
  const all = Object.entries({ ...stored(), [way]: kept })
    .sort(([, a], [, b]) => b.measuredMs - a.measuredMs)
    .slice(0, mostKept)
  try {
    localStorage.setItem(storageKey, JSON.stringify(Object.fromEntries(all)))
  } catch {
    // It then holds for this page only.
  }
}

/** Names the way that sound takes: this input, and the output the system has chosen now. */
export const wayOf = (
  stream: MediaStream,
  devices: readonly Pick<MediaDeviceInfo, 'kind' | 'deviceId' | 'label'>[]
) => {
  const input = stream.getAudioTracks()[0]?.getSettings().deviceId ?? ''
  const outputs = devices.filter(({ kind }) => kind === 'audiooutput')
  const chosen = outputs.find(({ deviceId }) => deviceId === 'default')
  // Where the browser does not name the chosen one, another set of outputs may mean another one.
  const output = chosen?.label || outputs.map(({ deviceId }) => deviceId).join(' ')
  return `${input} > ${output}`
}
