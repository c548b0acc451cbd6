// Judges the stretch engine, or a program to compare with, on tones of our own.
// node --import tsx tests/bench/stretch/main.ts [--only tones,plucks] [--name text] [--engine rubberband | --command "…{in} {out}…"]
//   [--keep folder [--reuse]] [--json file]
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { parseArgs } from 'node:util'
import { allCases, type Case } from './cases.ts'
import { commands, type Engine, identity, ownEngine, programEngine } from './engines.ts'
import { judge } from './judge.ts'
import { failuresOf, type Figures, limitsOf } from './limits.ts'
import { writeWav } from './wav.ts'

interface Row {
  name: string
  group: string
  figures: Figures
  failures: string[]
  engineMs: number
  judgeMs: number
}

const { values: options } = parseArgs({
  options: {
    only: { type: 'string' },
    name: { type: 'string' },
    engine: { type: 'string', default: 'ours' },
    command: { type: 'string' },
    keep: { type: 'string' },
    reuse: { type: 'boolean', default: false },
    json: { type: 'string' }
  }
})

const say = (text: string): void => void process.stdout.write(`${text}\n`)
const short = (value: number): string =>
  Number.isInteger(value) ? String(value) : value.toFixed(Math.abs(value) < 10 ? 2 : 1)

const engineOf = async (folder: string): Promise<Engine> => {
  const { command = commands[options.engine], engine } = options
  if (command) return programEngine(command, folder, options.reuse)
  if (engine === 'identity') return identity
  return ownEngine()
}

const wantedCases = (): Case[] => {
  const groups = options.only?.split(',')
  const cases = allCases().filter(
    (one) => (!groups || groups.includes(one.group)) && (!options.name || one.name.includes(options.name))
  )
  if (options.engine !== 'identity') return cases
  return cases.map((one) => ({ ...one, speed: 1, semitones: 0, cents: 0 }))
}

const measureCase = async (one: Case, engine: Engine): Promise<Row> => {
  const material = one.make()
  const began = performance.now()
  const output = await engine(material.sound, one, one.name)
  const between = performance.now()
  const figures = judge(one, material, output)
  const judgeMs = performance.now() - between
  if (options.keep) writeWav(join(options.keep, `${one.name.replace(/[^\w.+-]+/g, '-')}-judged.wav`), output)
  const hertz = material.tone?.hertz ?? material.attacks?.[0]?.hertz
  const failures = failuresOf(figures, limitsOf(one, hertz === undefined ? {} : { hertz }))
  return { name: one.name, group: one.group, figures, failures, engineMs: between - began, judgeMs }
}

const lineOf = ({ name, figures, failures }: Row): string => {
  const all = Object.entries(figures).map(
    ([figure, value]) => `${failures.includes(figure) ? '!' : ''}${figure} ${short(value)}`
  )
  return `${failures.length === 0 ? 'ok  ' : 'FAIL'} ${name.padEnd(22)} ${all.join('  ')}`
}

const summaryOf = (rows: readonly Row[], title: string): string => {
  const passed = rows.filter((row) => row.failures.length === 0).length
  const butRise = rows.filter((row) => row.failures.every((figure) => figure === 'rise')).length
  const doubled = rows.reduce((sum, row) => sum + (row.figures.doubled ?? 0), 0)
  const seconds = (pick: (row: Row) => number): string =>
    (rows.reduce((sum, row) => sum + pick(row), 0) / 1000).toFixed(1)
  return `${title.padEnd(8)} passed ${passed} of ${rows.length} (${butRise} but for the rise), doubled ${doubled}; engine ${seconds((row) => row.engineMs)} s, judge ${seconds((row) => row.judgeMs)} s`
}

const main = async (): Promise<void> => {
  const folder = options.keep ?? mkdtempSync(join(tmpdir(), 'plumbline-stretch-'))
  try {
    const engine = await engineOf(folder).catch((error: unknown) => {
      say(`The engine cannot be loaded: ${error instanceof Error ? error.message : String(error)}`)
      process.exitCode = 2
    })
    if (!engine) return
    const rows: Row[] = []
    for (const one of wantedCases()) {
      const row = await measureCase(one, engine)
      rows.push(row)
      say(lineOf(row))
    }
    for (const group of new Set(rows.map((row) => row.group)))
      say(
        summaryOf(
          rows.filter((row) => row.group === group),
          group
        )
      )
    say(summaryOf(rows, 'all'))
    if (options.json) writeFileSync(options.json, JSON.stringify(rows, null, 1))
  } finally {
    if (!options.keep) rmSync(folder, { recursive: true, force: true })
  }
}

await main()
