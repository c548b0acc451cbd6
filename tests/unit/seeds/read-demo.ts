// The committed demo, read as the seeds read it.
import { readFileSync, readdirSync } from 'node:fs'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { toNumber } from '@shared/timing/rational'
import type { DemoComment, DemoNote, DemoTake, DemoTune } from '../../../seeds/render/demo-types'

export const demoFolder = new URL('../../../seeds/demo/', import.meta.url)
const read = (name: string): unknown => JSON.parse(readFileSync(new URL(name, demoFolder), 'utf8'))
const others = new Set(['tunes.json', 'comments.json', 'figures.json'])

export const tunes = read('tunes.json') as DemoTune[]
export const comments = read('comments.json') as DemoComment[]
export const takes = readdirSync(demoFolder)
  .filter((name) => name.endsWith('.json') && !others.has(name))
  .map((name) => read(name) as DemoTake)

export function takeOf(slug: string): DemoTake {
  const take = takes.find((each) => each.slug === slug)
  if (!take) throw new Error(`no take ${slug}`)
  return take
}

export function barMapOf(take: DemoTake): BarMap {
  const map = createBarMap(take.barMap)
  if (!map) throw new Error(`${take.slug}: no sound bar map`)
  return map
}

/** How far a note on the beat stands behind the pulse, in milliseconds. */
export const lateMs = (map: BarMap, note: DemoNote) =>
  (note.onsetSec - map.secAt({ bar: note.bar, beat: note.beat })) * 1000

export const onTheBeat = (note: DemoNote) => Number.isInteger(toNumber(note.beat))
