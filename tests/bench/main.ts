// `npm run bench [-- names…] [--rounds=N]`: a table and one JSON document, also kept in storage/bench.json.
import { mkdirSync, writeFileSync } from 'node:fs'
import { loadavg } from 'node:os'
import { join } from 'node:path'
import { assetFigures } from './assets.ts'
import { barMapFigures } from './bar-map.ts'
import { chordFigures } from './chords.ts'
import { commentFigures } from './comments.ts'
import { deskFigures } from './desk.ts'
import { memoryFigures } from './engine/memory.ts'
import { qualityFigures } from './engine/quality.ts'
import { renderFigures } from './engine/render.ts'
import { ingestFigures } from './ingest.ts'
import { root } from './processes.ts'
import { rangeFigures } from './range.ts'
import { type Figure, machineFacts, type Measured, tableOf } from './report.ts'
import { createStage, type Stage } from './stage.ts'

const benches: Record<string, (stage: Stage, rounds: number) => Promise<Figure[]>> = {
  chords: (_stage, rounds) => chordFigures(rounds),
  barmap: (_stage, rounds) => barMapFigures(rounds),
  comments: commentFigures,
  range: rangeFigures,
  assets: assetFigures,
  desk: deskFigures,
  memory: () => memoryFigures(),
  quality: () => qualityFigures(),
  render: (_stage, rounds) => renderFigures(rounds),
  ingest: (_stage, rounds) => ingestFigures(rounds)
}
const needPage = ['assets', 'desk']

const say = (text: string): void => {
  process.stderr.write(`${text}\n`)
}

const args = process.argv.slice(2)
const names = args.filter((arg) => !arg.startsWith('--'))
const rounds = Number(/^--rounds=(\d+)$/.exec(args.find((arg) => arg.startsWith('--')) ?? '')?.[1] ?? 3)
const wanted = names.length > 0 ? names : Object.keys(benches)

/** One that fails is said to have failed; the others are measured all the same. */
const figuresOf = async (name: string, stage: Stage): Promise<Figure[]> => {
  try {
    return (await benches[name]?.(stage, rounds)) ?? []
  } catch (error) {
    say(`${name} failed: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`)
    process.exitCode = 1
    return []
  }
}

const run = async (stage: Stage): Promise<Measured[]> => {
  const measured: Measured[] = []
  for (const name of wanted) {
    say(`${name} …`)
    const began = performance.now()
    const figures = await figuresOf(name, stage)
    const load = Math.round((loadavg()[0] ?? 0) * 100) / 100
    measured.push({ bench: name, seconds: Math.round((performance.now() - began) / 1000), load, figures })
  }
  return measured
}

const main = async (): Promise<void> => {
  const unknown = wanted.filter((name) => !Object.hasOwn(benches, name))
  if (unknown.length > 0) {
    say(`There is no ${unknown.join(', ')}. Benches: ${Object.keys(benches).join(', ')}.`)
    process.exitCode = 2
    return
  }
  const machine = machineFacts()
  const stage = createStage(wanted.some((name) => needPage.includes(name)))
  let isEnding = false
  const end = (signal: NodeJS.Signals) => {
    if (isEnding) return
    isEnding = true
    void stage.close().finally(() => process.exit(signal === 'SIGINT' ? 130 : 143))
  }
  process.on('SIGINT', end)
  process.on('SIGTERM', end)
  const measured = await run(stage).finally(() => stage.close())
  const document = {
    date: new Date().toISOString(),
    command: ['npm run bench --', ...args].join(' '),
    rounds,
    machine,
    measured
  }
  mkdirSync(join(root, 'storage'), { recursive: true })
  const json = JSON.stringify(document, null, 2)
  writeFileSync(join(root, 'storage', 'bench.json'), `${json}\n`)
  process.stdout.write(`${tableOf(measured)}\n\n${json}\n`)
}

await main()
