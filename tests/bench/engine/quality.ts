// The judge of the stretch core on a few of its cases, the same for ours and for programs to compare with.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { alone, type Figure } from '../report.ts'
import { allCases, type Case, type Group } from '../stretch/cases.ts'
import { commands, type Engine, ownEngine, programEngine } from '../stretch/engines.ts'
import { judge } from '../stretch/judge.ts'
import { failuresOf, limitsOf } from '../stretch/limits.ts'

const peers = ['rubberband', 'soundstretch']

/** Low and high, half and quarter speed, one shifted, of every kind that needs nothing beside the project. */
const chosen = [
  'tone 41 x0.5',
  'tone 82 x0.25',
  'tone 82 x0.5 +12',
  'pluck 41 x0.5',
  'pluck 98 x0.5',
  'pluck 55 x0.25',
  'bursts x0.5',
  'blips x0.25',
  'mix held x0.5',
  'mix dying x0.5'
]

interface Row {
  group: Group
  /** The worst of each figure counts, so sizes. */
  figures: Record<string, number>
  isPassed: boolean
}

const rowOf = async (one: Case, engine: Engine): Promise<Row> => {
  const material = one.make()
  const figures = judge(one, material, await engine(material.sound, one, one.name))
  const hertz = material.tone?.hertz ?? material.attacks?.[0]?.hertz
  const failures = failuresOf(figures, limitsOf(one, hertz === undefined ? {} : { hertz }))
  return { group: one.group, figures, isPassed: failures.length === 0 }
}

const asked: { name: string; unit: string; figure: string; groups: Group[]; isSum?: boolean }[] = [
  { name: 'pitch of tones, worst', unit: 'cents', figure: 'cents', groups: ['tones'] },
  { name: 'note places, 95 %, worst', unit: 'ms', figure: 'place95', groups: ['plucks', 'clicks'] },
  { name: 'attack rise to the source, worst', unit: 'x', figure: 'rise', groups: ['plucks', 'clicks'] },
  { name: 'doubled attacks', unit: '', figure: 'doubled', groups: ['plucks', 'clicks'], isSum: true },
  { name: 'spectral distance of mixes, worst', unit: 'dB', figure: 'distance', groups: ['mixes'] }
]

const summed = (rows: readonly Row[], { figure, groups, isSum }: (typeof asked)[number]): number => {
  const values = rows
    .filter(({ group }) => groups.includes(group))
    .map(({ figures }) => Math.abs(figures[figure] ?? NaN))
  return isSum ? values.reduce((sum, value) => sum + value, 0) : Math.max(...values)
}

export const qualityFigures = async (): Promise<Figure[]> => {
  const cases = allCases().filter(({ name }) => chosen.includes(name))
  if (cases.length !== chosen.length) throw new Error('The judge has lost a case that the bench takes')
  const folder = mkdtempSync(join(tmpdir(), 'plumbline-quality-'))
  try {
    const engines: Record<string, Engine> = { ours: await ownEngine() }
    for (const name of peers) engines[name] = programEngine(commands[name] ?? '', join(folder, name), false)
    const rows: Record<string, Row[]> = {}
    for (const [name, engine] of Object.entries(engines)) {
      const list: Row[] = (rows[name] = [])
      for (const one of cases) list.push(await rowOf(one, engine))
    }
    const how = `${cases.length} cases of tests/bench/stretch: ${chosen.join(', ')}`
    const passed = (list: readonly Row[] = []) => list.filter(({ isPassed }) => isPassed).length
    const pair = (name: string, unit: string, ours: number, peer: number): Figure => ({
      ...alone(name, unit, ours, how),
      peer,
      ratio: peer === 0 ? null : ours / peer
    })
    return peers.flatMap((peer) => [
      ...asked.map((one) =>
        pair(`${one.name}, beside ${peer}`, one.unit, summed(rows['ours'] ?? [], one), summed(rows[peer] ?? [], one))
      ),
      pair(`passed of ${cases.length}, beside ${peer}`, 'cases', passed(rows['ours']), passed(rows[peer]))
    ])
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
