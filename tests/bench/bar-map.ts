// Finding the place of a moment, beside the search that any such thing needs.
import { createBarMap } from '@shared/timing/bar-map'
import { lastAtOrBelow } from '@shared/timing/search'
import { compared, type Figure } from './report.ts'
import { perSecond } from './speed.ts'
import { inPairs } from './statistics.ts'
import { barMapOf } from './take-rows.ts'

const bars = 2000
const durationSec = 3600
const asked = 2000

export const barMapFigures = async (rounds: number): Promise<Figure[]> => {
  const body = barMapOf(bars, durationSec)
  const map = createBarMap(body)
  if (!map) throw new Error('The bar map is not sound')
  const moments = Array.from({ length: asked }, (_, i) => ((i * 0.618034) % 1) * durationSec)
  const secs = body.anchors.map(({ sec }) => sec)
  // What is found is added up, so that nothing is left out as useless.
  let sum = 0
  const search = () => {
    for (const sec of moments) sum += lastAtOrBelow(secs, (value) => value, sec)
  }
  const sides = {
    positionAt: () => {
      for (const sec of moments) sum += map.positionAt(sec).bar
    },
    secAt: () => {
      for (let i = 0; i < asked; i += 1) sum += map.secAt({ bar: (i * 7) % bars, beat: { n: 5, d: 2 } })
    }
  }
  const figures: Figure[] = []
  for (const [name, work] of Object.entries(sides)) {
    const pairs = await inPairs(
      Math.max(3, rounds),
      async () => perSecond(asked, work),
      async () => perSecond(asked, search)
    )
    figures.push(
      compared(
        name,
        'places/s',
        pairs,
        `${bars} anchors, ${asked} moments; peer: a binary search of the same anchors; more is better`
      )
    )
  }
  const opened = await inPairs(
    Math.max(3, rounds),
    async () => perSecond(1, () => createBarMap(body)),
    async () => perSecond(1, () => JSON.parse(JSON.stringify(body)) as unknown)
  )
  figures.push(
    compared('createBarMap', 'maps/s', opened, `${bars} anchors; peer: its JSON written and read; more is better`)
  )
  if (!Number.isFinite(sum)) throw new Error('A place is no number')
  return figures
}
