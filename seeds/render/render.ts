// Plays and records every demo take: node --import tsx seeds/render/render.ts [part of a slug]
// Writes seeds/demo: sound files, one JSON a take, tunes.json, comments.json and figures.json (what was measured).
import { createHash } from 'node:crypto'
import { existsSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import type { BarMapBody } from '@shared/timing/types'
import { type Clock, clockOf } from './clock'
import { comments } from './comments'
import type { DemoTake, TakePlan } from './demo-types'
import { drumHits } from './drums'
import { figuresOf, type Figures } from './figures'
import { playLine } from './hand'
import { comping } from './piano'
import { idFrom } from './random'
import { durationOf, encode, midiEvents, synthesize, type Performance } from './synth'
import { takes } from './takes'
import { tunes } from './tunes'

const demo = fileURLToPath(new URL('../demo/', import.meta.url))
const mimes = { m4a: 'audio/mp4', ogg: 'audio/ogg', mp3: 'audio/mpeg', webm: 'audio/webm' }
const write = (name: string, body: unknown) => writeFileSync(join(demo, name), `${JSON.stringify(body)}\n`)
const read = (name: string): Record<string, Figures> =>
  existsSync(join(demo, name)) ? (JSON.parse(readFileSync(join(demo, name), 'utf8')) as Record<string, Figures>) : {}

/** An anchor on every bar line, the closing one included: tempo is steady within a bar, so straight time is exact. */
function barMapOf(plan: TakePlan, clock: Clock): BarMapBody {
  const [upper = 4, lower = 4] = plan.tune.chart.meter.split('/').map(Number)
  const lines = Array.from({ length: clock.lastBar - clock.firstBar + 2 }, (_, index) => clock.firstBar + index)
  return {
    anchors: lines.map((bar) => ({
      id: idFrom(`${plan.slug} bar line ${bar}`),
      sec: Math.round(clock.barSec(bar) * 1e4) / 1e4,
      position: { bar, beat: { n: 1, d: 1 } }
    })),
    meters: [{ bar: clock.firstBar, meter: { upper, lower, pulse: 1 } }],
    marks: plan.form
  }
}

function record(plan: TakePlan, scratch: string): Figures {
  const clock = clockOf(plan)
  const bass = playLine(plan, clock)
  const endSec = clock.barSec(clock.lastBar + 1) + 0.9
  const path = join(scratch, plan.slug)
  const file = `${plan.slug}.${plan.sound.extension}`
  const durationSec = Math.round(endSec * 100) / 100
  const whole: Performance = {
    bass,
    hits: drumHits(plan, clock),
    chords: comping(plan, clock),
    kit: plan.drums?.kit ?? 0
  }
  synthesize(midiEvents(whole, plan.sound), endSec, plan.sound, path)
  encode(`${path}.wav`, plan.sound, durationSec, join(demo, file))
  let bassFile = join(demo, file)
  if (plan.drums || plan.piano) {
    bassFile = join(scratch, `bass-${file}`)
    synthesize(midiEvents({ ...whole, hits: [], chords: [] }, plan.sound), endSec, plan.sound, `${path}-bass`)
    encode(`${path}-bass.wav`, plan.sound, durationSec, bassFile)
  }

  const barMap = barMapOf(plan, clock)
  const notes = bass.map(({ note }) => note)
  const { slug, title, player, reach, named } = plan
  write(`${slug}.json`, {
    slug,
    title,
    tune: plan.tune.slug,
    player,
    with: plan.with,
    reach,
    named,
    file,
    mime: mimes[plan.sound.extension],
    durationSec: durationOf(join(demo, file)),
    bytes: statSync(join(demo, file)).size,
    sha256: createHash('sha256')
      .update(readFileSync(join(demo, file)))
      .digest('hex'),
    meter: plan.tune.chart.meter,
    downbeats: barMap.anchors.slice(0, -1).map(({ sec, position }) => ({ bar: position.bar, sec })),
    barMap,
    notes
  } satisfies DemoTake)
  return figuresOf(join(demo, file), bassFile, notes, clock)
}

const wanted = process.argv[2] ?? ''
const scratch = mkdtempSync(join(tmpdir(), 'demo-takes-'))
const figures = read('figures.json')
for (const plan of takes.filter(({ slug }) => slug.includes(wanted))) {
  figures[plan.slug] = record(plan, scratch)
  console.log(plan.slug, JSON.stringify(figures[plan.slug]))
}
rmSync(scratch, { recursive: true })
write('tunes.json', tunes)
write('comments.json', comments)
write('figures.json', figures)
