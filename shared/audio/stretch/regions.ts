// Spectra of several channels taken together, region by region: one partial each (Laroche & Dolson 1999).

/** Power of every bin, all channels together. */
export const powerOf = (re: readonly Float64Array[], im: readonly Float64Array[], power: Float64Array) => {
  power.fill(0)
  for (let c = 0; c < re.length; c++) {
    const [r, m] = [re[c]!, im[c]!]
    for (let k = 0; k < power.length; k++) power[k] = power[k]! + r[k]! * r[k]! + m[k]! * m[k]!
  }
}

/** Calls back with every region of influence [start, end): one peak each, parted at the valleys. */
export const eachRegion = (power: Float64Array, found: (start: number, end: number) => void) => {
  const bins = power.length
  const isPeak = (k: number) =>
    power[k]! >= (power[k - 1] ?? 0) &&
    power[k]! >= (power[k - 2] ?? 0) &&
    power[k]! > (power[k + 1] ?? 0) &&
    power[k]! > (power[k + 2] ?? 0)
  let start = 0
  let valley = 0
  let hasPeak = false
  for (let k = 0; k < bins; k++) {
    if (isPeak(k)) {
      if (hasPeak && valley > start) {
        found(start, valley)
        start = valley
      }
      hasPeak = true
      valley = k + 1
    } else if (valley >= bins || power[k]! < (power[valley] ?? Infinity)) valley = k
  }
  if (start < bins) found(start, bins)
}

/**
 * Unit phasor of the angle from the second spectrum to the first over [start, end), all channels together, and how long
 * their product was before it was made a unit.
 */
export const angleBetween = (
  lr: readonly Float64Array[],
  li: readonly Float64Array[],
  qr: readonly Float64Array[],
  qi: readonly Float64Array[],
  start: number,
  end: number
): [number, number, number] => {
  let r = 0
  let m = 0
  for (let c = 0; c < lr.length; c++) {
    const [ar, ai, br, bi] = [lr[c]!, li[c]!, qr[c]!, qi[c]!]
    for (let b = start; b < end; b++) {
      r += ar[b]! * br[b]! + ai[b]! * bi[b]!
      m += ai[b]! * br[b]! - ar[b]! * bi[b]!
    }
  }
  const length = Math.hypot(r, m)
  return length > 1e-20 ? [r / length, m / length, length] : [1, 0, 0]
}
