import { createHash } from 'node:crypto'
import { readFileSync, readdirSync, statSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { Reach } from '@shared/contracts/takes'
import { formOf } from '@shared/music/form'
import { readKey } from '@shared/music/key'
import { checkChart } from '@shared/music/validate-chart'
import { readMeter } from '@shared/timing/meter'
import { toNumber } from '@shared/timing/rational'
import { validateBarMap } from '@shared/timing/validate-bar-map'
import { barMapOf, demoFolder, lateMs, onTheBeat, takes, tunes } from './read-demo'

const megabyte = 1024 ** 2

describe('the demo tunes', () => {
  it.each([
    ['slack-tide', 32, '4/4'],
    ['ferry-money', 12, '4/4'],
    ['quay-lantern', 32, '3/4']
  ])('lays %s out over %i bars of %s', (slug, bars, meter) => {
    const chart = tunes.find((tune) => tune.slug === slug)?.chart
    if (!chart) throw new Error(`no tune ${slug}`)
    const form = formOf(chart)
    expect(form.bars).toHaveLength(bars)
    expect(chart.meter).toBe(meter)
    expect(form.sounding.every((bar) => bar.chords.length > 0)).toBe(true)
    expect(checkChart(chart).ok).toBe(true)
    expect(readKey(chart.key).ok).toBe(true)
  })

  it('stands still for eight bars at a time in Slack Tide, the bridge a fourth above', () => {
    const form = formOf(tunes.find((tune) => tune.slug === 'slack-tide')!.chart)
    const roots = form.sounding.map(({ chords }) => {
      const chord = chords[0]?.chord
      return chord && 'root' in chord ? chord.root : null
    })
    expect(roots).toEqual([...Array<number>(16).fill(7), ...Array<number>(8).fill(0), ...Array<number>(8).fill(7)])
  })
})

describe('the demo recordings', () => {
  it('are at least five and stay under 12 MB together with their notes', () => {
    expect(takes.length).toBeGreaterThanOrEqual(5)
    const bytes = readdirSync(demoFolder).reduce((sum, name) => sum + statSync(new URL(name, demoFolder)).size, 0)
    expect(bytes).toBeLessThan(12 * megabyte)
  })

  it('have a file to each take and a take to each file', () => {
    const files = readdirSync(demoFolder).filter((name) => !name.endsWith('.json'))
    expect(files.sort()).toEqual(takes.map((take) => take.file).sort())
  })

  it('come in several formats and in every setting: alone, with drums, with drums and piano', () => {
    expect(new Set(takes.map((take) => take.mime)).size).toBeGreaterThanOrEqual(3)
    for (const word of ['alone', 'brushes', 'piano']) expect(takes.some((take) => take.with.includes(word))).toBe(true)
  })

  it('show a minor’s take only to people named', () => {
    const minors = takes.filter((take) => take.player === 'wren')
    expect(minors.length).toBeGreaterThan(0)
    for (const take of minors) expect([take.reach, take.named.length > 0]).toEqual(['named', true])
  })
})

describe.each(takes.map((take) => [take.slug, take] as const))('%s', (_slug, take) => {
  const tune = tunes.find((each) => each.slug === take.tune)

  it('is the file it was written for', () => {
    const bytes = readFileSync(new URL(take.file, demoFolder))
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(take.sha256)
    expect(bytes.length).toBe(take.bytes)
    expect(Reach.safeParse(take.reach).success).toBe(true)
  })

  it('has a sound bar map that rises, in the tune’s meter, within the recording', () => {
    expect(validateBarMap(take.barMap).ok).toBe(true)
    expect(take.barMap.meters[0]?.meter).toEqual(readMeter(tune?.chart.meter ?? ''))
    const secs = take.barMap.anchors.map(({ sec }) => sec)
    expect(secs.every((sec, index) => sec > (secs[index - 1] ?? 0))).toBe(true)
    expect(secs.at(-1)).toBeLessThan(take.durationSec)
    expect(take.barMap.anchors.map(({ position }) => position.bar)).toEqual(
      take.barMap.anchors.map((_anchor, index) => (take.barMap.anchors[0]?.position.bar ?? 0) + index)
    )
    expect(take.downbeats.map(({ sec }) => sec)).toEqual(secs.slice(0, -1))
  })

  it('goes through the whole form of its tune at least once', () => {
    const bars = take.downbeats.filter(({ bar }) => bar >= 1).length
    const form = tune ? formOf(tune.chart).bars.length : Number.NaN
    expect(bars).toBeGreaterThanOrEqual(Math.max(16, form))
    const passes = take.barMap.marks.filter((mark) => mark.newPass)
    for (const [index, mark] of passes.entries()) {
      expect(mark.formBar).toBe(1)
      const next = passes[index + 1]
      if (next) expect(next.bar - mark.bar).toBe(form)
    }
  })

  it('has notes in the bass register, one after the other, within the recording', () => {
    let end = 0
    for (const [index, note] of take.notes.entries()) {
      expect(note.midi).toBeGreaterThanOrEqual(28)
      // The upper note of a tenth may stand above the staff.
      expect(note.midi).toBeLessThanOrEqual(52)
      expect(note.offsetSec).toBeGreaterThan(note.onsetSec)
      const before = take.notes[index - 1]
      const isStacked = before?.onsetSec === note.onsetSec
      if (!isStacked) expect(note.onsetSec).toBeGreaterThan(end)
      end = note.offsetSec
    }
    expect(end).toBeLessThan(take.durationSec)
  })

  it('fills each bar with written lengths that do not overlap and stay in their bar', () => {
    const upper = take.barMap.meters[0]?.meter.upper ?? 0
    for (const note of take.notes) {
      const end = toNumber(note.beat) - 1 + toNumber(note.lengthBeats)
      expect(toNumber(note.beat)).toBeGreaterThanOrEqual(1)
      expect(end).toBeLessThanOrEqual(upper + 1e-9)
    }
  })

  it('is played by a person: near the pulse, never on it to the millisecond throughout', () => {
    const map = barMapOf(take)
    const late = take.notes.filter(onTheBeat).map((note) => lateMs(map, note))
    const mean = late.reduce((sum, ms) => sum + ms, 0) / late.length
    const deviation = Math.sqrt(late.reduce((sum, ms) => sum + (ms - mean) ** 2, 0) / late.length)
    expect(Math.abs(mean)).toBeLessThan(20)
    expect(deviation).toBeGreaterThan(5)
    expect(deviation).toBeLessThan(30)
  })
})
