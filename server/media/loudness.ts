// Loudness after EBU R 128 as ffmpeg's ebur128 filter sums it up, and the gain that follows from it.
export type Loudness = {
  /** -70 when too short or too quiet to measure (the absolute gate of ITU-R BS.1770). */
  integratedLufs: number
  truePeakDb: number
  gainDb: number
}

/** Moderate on purpose: a study room is listened to for hours. */
const targetLufs = -18
const truePeakCeilingDb = -1
const gateLufs = -70
/** What stands in for the peak of pure silence, whose logarithm has no value. */
const silentPeakDb = -120

const round = (value: number): number => Math.round(value * 10) / 10 + 0

/** Gain in dB, towards -18 LUFS but never lifting the true peak above -1 dBTP. */
export const gainFor = (integratedLufs: number, truePeakDb: number): number => {
  const wanted = integratedLufs <= gateLufs ? 0 : targetLufs - integratedLufs
  return round(Math.floor(Math.min(wanted, truePeakCeilingDb - truePeakDb) * 10 + 1e-6) / 10)
}

/** Filter that measures what passes and says the sums at the end, on the info log level. */
export const loudnessFilter = 'ebur128=peak=true:framelog=verbose'

/** Reads the filter's summary; undefined when it is not there. */
export const readLoudness = (log: string): Loudness | undefined => {
  const summary = log.slice(log.lastIndexOf('Summary:'))
  const integrated = /\bI:\s+(-?[\d.]+|-inf|nan) LUFS/.exec(summary)?.[1]
  const peak = /\bPeak:\s+(-?[\d.]+|-inf|nan) dBFS/.exec(summary)?.[1]
  if (integrated === undefined || peak === undefined) return undefined
  const finite = (text: string, otherwise: number) => (Number.isFinite(Number(text)) ? Number(text) : otherwise)
  const integratedLufs = Math.max(gateLufs, finite(integrated, gateLufs))
  // The summary rounds to a tenth: the peak may be half of one higher than it says.
  const truePeakDb = finite(peak, silentPeakDb)
  return { integratedLufs, truePeakDb, gainDb: gainFor(integratedLufs, truePeakDb + 0.05) }
}
