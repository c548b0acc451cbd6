import { cleanup, render, screen } from '@testing-library/react'
import { afterEach, describe, expect, it } from 'vitest'
import { readChord } from '@shared/music/chord'
import { DEFAULT_CHORD_STYLE, typesetChord } from '@shared/music/chord-typeset'
import { chordRuns } from '@client/ui/chord-runs'
import { ChordSymbol } from '@client/ui/chord-symbol'
import { drawChord, measureChord } from '@client/ui/draw-chord'
import type { ChordContext } from '@client/ui/draw-chord'

afterEach(cleanup)

const triangleHand = { ...DEFAULT_CHORD_STYLE, majorSeventh: 'triangle' as const }

function chordOf(text: string) {
  const read = readChord(text)
  if (!read.ok) throw new Error(`no chord: ${text}`)
  return read.value
}

const raised = (text: string) => chordRuns(typesetChord(chordOf(text))).filter(({ rise }) => rise > 0)
const onLine = (text: string) => chordRuns(typesetChord(chordOf(text))).filter(({ rise }) => rise === 0)
const join = (runs: { text: string }[]) => runs.map(({ text }) => text).join('')

describe('chordRuns', () => {
  it('sets the root and letters on the line and raises figures and extensions', () => {
    expect(join(onLine('Cm7'))).toBe('Cm')
    expect(join(raised('Cm7'))).toBe('7')
    expect(join(onLine('Ebmaj7'))).toBe('E♭maj')
    expect(join(raised('G7b9'))).toBe('7♭9')
  })

  it('takes every accidental from the signs face and every letter from the text face', () => {
    for (const text of ['Bb7', 'F#m7b5', 'D7#9b13', 'Abdim7', 'Bbm7/Ab']) {
      for (const run of chordRuns(typesetChord(chordOf(text)))) {
        expect(run.face === 'signs').toBe(/^[♭♯°ø]+$/u.test(run.text))
      }
    }
  })

  it('draws the major seventh from SMuFL csymMajorSeventh, U+E873', () => {
    const runs = chordRuns(typesetChord(chordOf('Cmaj7'), triangleHand))
    expect(runs.at(-1)).toMatchObject({ text: '\uE873', face: 'signs' })
  })
})

describe('ChordSymbol', () => {
  it('is spoken in words', () => {
    render(<ChordSymbol chord={chordOf('Bb7#11')} />)
    expect(screen.getByRole('img').getAttribute('aria-label')).toMatch(/^B flat seventh, sharp eleven$/u)
  })
})

describe('drawChord', () => {
  // Every character 10 wide at 20 px; remembers what was drawn where and in which font.
  const recorder = () => {
    const drawn: { text: string; x: number; y: number; font: string }[] = []
    const ctx = {
      font: '',
      fillStyle: '',
      textBaseline: 'top' as CanvasTextBaseline,
      textAlign: 'center' as CanvasTextAlign,
      measureText: (text: string) => ({
        width: [...text].length * (Number.parseFloat(ctx.font.split(' ')[1] ?? '') / 2)
      }),
      fillText: (text: string, x: number, y: number) => void drawn.push({ text, x, y, font: ctx.font })
    }
    return { drawn, ctx: ctx as unknown as ChordContext }
  }

  it('draws the same pieces as the page, from left to right, and returns the measured width', () => {
    const set = typesetChord(chordOf('Bbm7b5/Db'))
    const { drawn, ctx } = recorder()
    const width = drawChord(ctx, set, 100, 50, 20, '#123456')
    expect(drawn.map(({ text }) => text)).toEqual(chordRuns(set).map(({ text }) => text))
    expect(drawn.every(({ x }, index) => x > (drawn[index - 1]?.x ?? 99))).toBe(true)
    expect(measureChord(ctx, set, 20)).toBeCloseTo(width, 9)
    expect(ctx.fillStyle).toBe('#123456')
  })

  it('raises by size and draws a repeated bar in the lighter weight', () => {
    const { drawn, ctx } = recorder()
    drawChord(ctx, typesetChord(chordOf('G7')), 0, 50, 20, 'ink', { faint: true })
    expect(drawn[0]).toMatchObject({ text: 'G', y: 50 })
    expect(drawn[1]?.y).toBeLessThan(50)
    expect(drawn.every(({ font }) => font.startsWith('400 '))).toBe(true)
  })
})
