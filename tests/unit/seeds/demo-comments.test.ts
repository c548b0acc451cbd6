import { describe, expect, it } from 'vitest'
import { CommentKind, opens } from '@shared/contracts/comments'
import { limits } from '@shared/limits'
import { toNumber } from '@shared/timing/rational'
import { barMapOf, comments, lateMs, onTheBeat, takeOf, takes } from './read-demo'

const ines = takeOf('slack-tide-ines-second-try')
const mara = takeOf('slack-tide-mara-example')
const tomas = takeOf('ferry-money-tomas-alone')
const wren = takeOf('quay-lantern-wren-practice')

const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
const pitchesIn = (take: typeof ines, bar: number) => take.notes.filter((note) => note.bar === bar).map((n) => n.midi)
const pitchOn = (take: typeof ines, bar: number, beat: number) =>
  take.notes.find((note) => note.bar === bar && toNumber(note.beat) === beat)?.midi

describe('the demo comments', () => {
  it('stand on spans that exist in their take and belong to a take each', () => {
    for (const { take: slug, from, to } of comments) {
      const take = takeOf(slug)
      const map = barMapOf(take)
      const [first, last] = [take.barMap.anchors[0], take.barMap.anchors.at(-1)]
      expect(map.secAt(to)).toBeGreaterThan(map.secAt(from))
      expect(map.secAt(from)).toBeGreaterThanOrEqual(first?.sec ?? Number.NaN)
      expect(map.secAt(to)).toBeLessThanOrEqual(last?.sec ?? Number.NaN)
    }
    for (const take of takes) expect(comments.some((comment) => comment.take === take.slug)).toBe(true)
  })

  it('use every kind, and only questions and things to fix are open or settled', () => {
    expect(new Set(comments.map(({ kind }) => kind))).toEqual(new Set(CommentKind.options))
    for (const { kind, state } of comments) expect(state !== null).toBe(opens(kind))
    for (const state of ['open', 'settled']) {
      for (const kind of ['question', 'to fix'])
        expect(comments.some((comment) => comment.state === state && comment.kind === kind)).toBe(true)
    }
  })

  it('are answered and settled after they were written, and never in the future', () => {
    for (const { agoHours, replies, state, settledBy, settledAgoHours } of comments) {
      const times = [agoHours, ...replies.map((reply) => reply.agoHours), 0]
      expect(times).toEqual([...times].sort((a, b) => b - a))
      expect(new Set(times).size).toBe(times.length)
      expect([settledBy, settledAgoHours].every((value) => (value !== undefined) === (state === 'settled'))).toBe(true)
      if (settledAgoHours !== undefined) expect(settledAgoHours).toBeLessThan(agoHours)
    }
  })

  it('come only from people who may hear the take', () => {
    for (const { take: slug, author, replies, settledBy } of comments) {
      const take = takeOf(slug)
      if (take.reach === 'group') continue
      const hearers: string[] = [take.player, ...take.named]
      for (const who of [author, settledBy ?? author, ...replies.map((reply) => reply.author)])
        expect(hearers).toContain(who)
    }
  })

  it('fit into a comment', () => {
    for (const { text, replies } of comments) {
      for (const words of [text, ...replies.map((reply) => reply.text)]) {
        expect(words.trim()).toBe(words)
        expect(words.length).toBeGreaterThan(0)
        expect(words.length).toBeLessThanOrEqual(limits.commentText)
      }
    }
  })
})

describe('what the comments say is what the recordings hold', () => {
  it('Inés falls about 80 ms behind in bars 11 and 12, is still late in 13 and not elsewhere in the first chorus', () => {
    const map = barMapOf(ines)
    const late = (first: number, last: number) =>
      mean(ines.notes.filter((n) => n.bar >= first && n.bar <= last && onTheBeat(n)).map((note) => lateMs(map, note)))
    expect(Math.abs(late(11, 12) - 80)).toBeLessThan(20)
    expect(late(13, 13)).toBeGreaterThan(40)
    expect(Math.abs(late(1, 10))).toBeLessThan(25)
    expect(Math.abs(late(14, 32))).toBeLessThan(25)
  })

  it('Inés plays B natural on beat 2 of bar 41, loses beats 2 and 3 of bar 45, and leads by step into bar 17', () => {
    expect(pitchOn(ines, 41, 2)).toBe(35)
    expect(ines.notes.filter((note) => note.bar === 45).map((note) => toNumber(note.beat))).toEqual([1, 4])
    expect(pitchesIn(ines, 16)).toEqual([31, 33, 34, 35])
    expect(pitchOn(ines, 17, 1)).toBe(36)
  })

  it('the second bridge walks through other chords: one note apart with Inés, rooted with Mara', () => {
    const classes = (take: typeof ines, bar: number) => pitchesIn(take, bar).map((midi) => midi % 12)
    expect(classes(ines, 50)).toEqual([11, 2, 5, 8])
    expect(classes(ines, 52)).toEqual([10, 2, 5, 8])
    expect(pitchOn(ines, 51, 1)).toBe(43)
    expect(classes(mara, 50)).toEqual([7, 11, 8, 5])
    expect(pitchOn(mara, 51, 1)).toBe(39)
    expect(classes(mara, 52)).toEqual([2, 5, 10, 8])
    expect(pitchOn(mara, 53, 1)).toBe(31)
    expect(classes(mara, 54)).toEqual([8, 5, 2, 11])
  })

  it('Mara begins with a pick-up in bar 0', () => {
    expect(toNumber(mara.notes[0]?.beat ?? { n: 0, d: 1 })).toBe(3)
    expect(mara.notes[0]?.bar).toBe(0)
  })

  it('Tomás creeps from just over 119 to near 123, and plays D where the chart has D flat in bar 30 only', () => {
    const map = barMapOf(tomas)
    const tempo = (first: number, last: number) =>
      ((last - first + 1) * 4 * 60) / (map.barSec(last + 1) - map.barSec(first))
    const [countIn, third] = [tempo(0, 0), tempo(25, 36)]
    expect(countIn).toBeGreaterThan(119)
    expect(countIn).toBeLessThan(119.5)
    expect(Math.abs(third - 123)).toBeLessThan(0.5)
    expect(pitchOn(tomas, 30, 3)).toBe(38)
    for (const bar of [6, 18]) expect(pitchesIn(tomas, bar)).toContain(37)
    expect(pitchOn(tomas, 36, 4)).toBe(30)
  })

  it('Wren searches in bar 22 and plays E for E flat in bar 24, having had it in bar 8', () => {
    const map = barMapOf(wren)
    const length = (bar: number) => map.barSec(bar + 1) - map.barSec(bar)
    expect(length(22) / length(21)).toBeGreaterThan(1.3)
    expect(length(23) / length(21)).toBeLessThan(1.05)
    expect(pitchOn(wren, 24, 2)).toBe(40)
    expect(pitchesIn(wren, 8)).toContain(39)
  })
})
