import { describe, expect, it } from 'vitest'
import { palettes } from '../../../tailwind.config'
import type { ColourName } from '../../../tailwind.config'

type Pair = [ColourName, ColourName]

// Relative luminance and contrast ratio as defined in WCAG 2.2 ("relative luminance", "contrast ratio").
function luminance(hex: string): number {
  const channel = (at: number) => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16) / 255
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4
  }
  return 0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5)
}

function contrast(a: string, b: string): number {
  const [dark, light] = [luminance(a), luminance(b)].sort((x, y) => x - y) as [number, number]
  return (light + 0.05) / (dark + 0.05)
}

const across = (fronts: ColourName[], grounds: ColourName[]): Pair[] =>
  fronts.flatMap((front) => grounds.map((ground): Pair => [front, ground]))

const textPairs: Pair[] = [
  ...across(['ink', 'pencil', 'claim', 'fault', 'brass'], ['paper', 'sheet', 'wash']),
  // The chord of a repeated bar stands on a lane, never on the page; a selection may tint it.
  ...across(['faint'], ['sheet', 'wash']),
  // The words on the brass button, the leader's name, selected text.
  ...across(['sheet'], ['brass', 'ink', 'fault'])
]

const linePairs: Pair[] = [
  ...across(['ink', 'pencil', 'claim', 'brass', 'fault'], ['paper', 'sheet', 'wash']),
  // The plumb line over the waveform is set off by its edge of sheet on both sides.
  ['sheet', 'ink']
]

describe('contrast ratio', () => {
  it('agrees with the extremes WCAG states: 21:1 for black on white, 1:1 for a colour on itself', () => {
    expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 10)
    expect(contrast('#8A5D12', '#8A5D12')).toBe(1)
  })
})

describe.each(['light', 'dark'] as const)('%s palette', (theme) => {
  it.each(textPairs)('keeps text readable: %s on %s reaches 4.5:1 (WCAG 1.4.3)', (front, ground) => {
    expect(contrast(palettes[theme][front], palettes[theme][ground])).toBeGreaterThanOrEqual(4.5)
  })

  it.each(linePairs)('keeps lines that carry meaning visible: %s on %s reaches 3:1 (WCAG 1.4.11)', (front, ground) => {
    expect(contrast(palettes[theme][front], palettes[theme][ground])).toBeGreaterThanOrEqual(3)
  })

  it('keeps the chord of a repeated bar fainter than a written one', () => {
    const { faint, pencil, ink, sheet } = palettes[theme]
    expect(contrast(faint, sheet)).toBeLessThan(contrast(pencil, sheet))
    expect(contrast(pencil, sheet)).toBeLessThan(contrast(ink, sheet))
  })
})
