// The colours of tailwind.config.ts as canvas code needs them: read from the page, in the theme that is on now.
import { useState } from 'react'
import { useScope } from '@client/lib/scope'
import type { Scope } from '@client/lib/scope'
import { palettes } from '../../tailwind.config'
import type { ColourName } from '../../tailwind.config'

export type Tokens = Record<ColourName, string>

const names = Object.keys(palettes.light) as ColourName[]

export function readTokens(element: Element = document.documentElement): Tokens {
  const style = getComputedStyle(element)
  return Object.fromEntries(names.map((name) => [name, style.getPropertyValue(`--${name}`).trim()])) as Tokens
}

/** Calls back with fresh tokens whenever the system's theme, contrast or the reader's choice changes. */
export function watchTokens(scope: Scope, onChange: (tokens: Tokens) => void): void {
  const tell = () => onChange(readTokens())
  scope.listen(matchMedia('(prefers-color-scheme: dark)'), 'change', tell)
  const observer = new MutationObserver(tell)
  scope.observe(observer, document.documentElement, { attributes: true, attributeFilter: ['data-theme'] })
}

export function useTokens(): Tokens {
  const [tokens, setTokens] = useState(readTokens)
  useScope((scope) => watchTokens(scope, setTokens), [])
  return tokens
}

/** Families for `ctx.font`; the stack is that of the page. */
export const canvasFonts = {
  text: 'Lexend, "Lexend stand-in", "Plumbline Signs", sans-serif',
  signs: '"Plumbline Signs", Lexend, sans-serif',
  figures: '"Plumbline Figures", Lexend, sans-serif'
} as const

/** Resolves when the faces a canvas draws with are there; a canvas does not repaint by itself when they arrive. */
export async function fontsReady(): Promise<void> {
  const faces = [400, 600].flatMap((weight) => Object.values(canvasFonts).map((family) => `${weight} 16px ${family}`))
  await Promise.allSettled(faces.map((face) => document.fonts.load(face, 'C7♭\uE873')))
}

/** Runs `draw` when the fonts are there, unless the scope ended meanwhile. */
export function whenFontsReady(scope: Scope, draw: () => void): void {
  void fontsReady().then(() => {
    if (!scope.disposed) draw()
  })
}
