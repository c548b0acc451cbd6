// Where the bars of a take stand in the played form. Bars a take adds, drops or repeats are told by its marks.
import { lastAtOrBelow } from '@shared/timing/search'
import type { FormMark } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'

export interface FormPlan {
  /** Rising by bar, as in the bar map. */
  marks: readonly FormMark[]
  /** Bars of the played form; 0 without a form. */
  formLength: number
  /** Whether the end of the form opens another pass by itself. */
  cyclic: boolean
}

/** Passes count from 1. `formBar` is null outside the form: by a mark, or `beyond` the end of a form that does not come round. */
export interface FormPlace {
  pass: number
  formBar: number | null
  beyond: boolean
}

/** What part of the take a bar belongs to; `bar` counts within it (in a pass: within the form; in a pick-up: through the take). */
export interface TakePart {
  kind: 'pick-up' | 'introduction' | 'pass' | 'interlude' | 'ending' | 'bars'
  bar: number
  pass: number | null
}

export interface FormMap {
  plan: FormPlan
  /** Place in the form; null before the first pass and without a form. */
  formPlaceOf(bar: BarIndex): FormPlace | null
  /** First bar of the take at that place; null when it is not played. The last pass may lie past the end of the take. */
  barOf(pass: number, formBar: number): BarIndex | null
  partOf(bar: BarIndex): TakePart
}

/** From one mark to the next; `pass` is the one at its first bar, `formBar` from 0 here. */
interface Stretch {
  bar: BarIndex
  endBar: BarIndex
  pass: number
  formOffset: number | null
}

/** `createFormMap({ marks: [{ bar: 1, formBar: 1, newPass: true }], formLength: 32, cyclic: true })`: bar 51 is bar 19, pass 2. */
export const createFormMap = (plan: FormPlan): FormMap => {
  const { formLength, cyclic } = plan
  const stretches = formLength > 0 ? stretchesOf(plan) : []
  const stretchAt = (bar: BarIndex) => stretches[lastAtOrBelow(stretches, (stretch) => stretch.bar, bar)]

  const formPlaceOf = (bar: BarIndex): FormPlace | null => {
    const stretch = stretchAt(bar)
    if (!stretch || stretch.pass === 0) return null
    if (stretch.formOffset === null) return { pass: stretch.pass, formBar: null, beyond: false }
    const offset = stretch.formOffset + bar - stretch.bar
    if (offset < formLength) return { pass: stretch.pass, formBar: offset + 1, beyond: false }
    if (!cyclic) return { pass: stretch.pass, formBar: null, beyond: true }
    return { pass: stretch.pass + Math.floor(offset / formLength), formBar: (offset % formLength) + 1, beyond: false }
  }

  const barOf = (pass: number, formBar: number): BarIndex | null => {
    if (!(formBar >= 1 && formBar <= formLength)) return null
    for (const stretch of stretches) {
      if (stretch.formOffset === null || pass < stretch.pass || (pass > stretch.pass && !cyclic)) continue
      const distance = (pass - stretch.pass) * formLength + formBar - 1 - stretch.formOffset
      if (distance >= 0 && stretch.bar + distance < stretch.endBar) return stretch.bar + distance
    }
    return null
  }

  const partOf = (bar: BarIndex): TakePart => {
    const place = formPlaceOf(bar)
    if (place && place.formBar !== null) return { kind: 'pass', bar: place.formBar, pass: place.pass }
    if (bar < 1) return { kind: 'pick-up', bar, pass: null }
    const stretch = stretchAt(bar)
    if (!place || !stretch) {
      return { kind: stretches.some(({ pass }) => pass > 0) ? 'introduction' : 'bars', bar, pass: null }
    }
    const outside = place.beyond ? stretch.bar + formLength - (stretch.formOffset ?? 0) : stretch.bar
    const goesOn = stretches.some((later) => later.bar > bar && later.formOffset !== null)
    return { kind: goesOn ? 'interlude' : 'ending', bar: bar - Math.max(outside, stretch.bar) + 1, pass: place.pass }
  }

  return { plan, formPlaceOf, barOf, partOf }
}

const stretchesOf = ({ marks, formLength, cyclic }: FormPlan): Stretch[] => {
  let pass = 0
  return marks.map((mark, i) => {
    const endBar = marks[i + 1]?.bar ?? Infinity
    if (mark.formBar === null) return { bar: mark.bar, endBar, pass, formOffset: null }
    // The first place in the form opens the first pass, said or not.
    if (mark.newPass || pass === 0) pass += 1
    const formOffset = cyclic ? (mark.formBar - 1) % formLength : mark.formBar - 1
    const stretch = { bar: mark.bar, endBar, pass, formOffset }
    if (cyclic && Number.isFinite(endBar)) pass += Math.floor((formOffset + endBar - 1 - mark.bar) / formLength)
    return stretch
  })
}
