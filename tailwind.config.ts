import type { Config } from 'tailwindcss'
import plugin from 'tailwindcss/plugin'

/**
 * Every colour of the product, once. `rule` only divides and `wash` only tints: neither carries meaning by itself.
 * tests/unit/look/contrast.test.ts holds each pair that carries text or meaning to WCAG 2.2 (1.4.3, 1.4.11).
 */
export const palettes = {
  light: {
    paper: '#EEF1F2',
    sheet: '#FFFFFF',
    wash: '#EAEEF0',
    rule: '#CBD2D6',
    ink: '#16212B',
    pencil: '#56626D',
    faint: '#626C75',
    brass: '#8A5D12',
    claim: '#4A3F8C',
    fault: '#A3322B'
  },
  dark: {
    paper: '#14181D',
    sheet: '#1B2128',
    wash: '#262E37',
    rule: '#333D47',
    ink: '#E9EDEF',
    pencil: '#9DA8B1',
    faint: '#8D979F',
    brass: '#E0AC4F',
    claim: '#B3ABEF',
    fault: '#F2917F'
  }
} as const

export type ColourName = keyof typeof palettes.light

const colourNames = Object.keys(palettes.light) as ColourName[]

const variables = (theme: keyof typeof palettes): Record<string, string> => ({
  'color-scheme': theme,
  ...Object.fromEntries(colourNames.map((name) => [`--${name}`, palettes[theme][name]]))
})

const text = ['Lexend', '"Lexend stand-in"', '"Plumbline Signs"', 'system-ui', 'sans-serif']

const config: Config = {
  content: [],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...Object.fromEntries(colourNames.map((name) => [name, `var(--${name})`]))
    },
    fontFamily: {
      sans: text,
      signs: ['"Plumbline Signs"', ...text],
      figures: ['"Plumbline Figures"', ...text]
    },
    fontWeight: { normal: '400', semibold: '600' },
    borderRadius: { none: '0', DEFAULT: '2px', full: '9999px' },
    // Size and line height in rem, so that a reader's own font size is respected.
    fontSize: {
      xs: ['0.75rem', '1.125rem'],
      sm: ['0.8125rem', '1.25rem'],
      base: ['0.9375rem', '1.4375rem'],
      lg: ['1.125rem', '1.625rem'],
      xl: ['1.375rem', '1.75rem']
    }
  },
  plugins: [
    plugin(({ addBase }) =>
      addBase({
        // The system's choice, unless `data-theme` on <html> says otherwise.
        ':root': variables('light'),
        '@media (prefers-color-scheme: dark)': { ':root:not([data-theme="light"])': variables('dark') },
        ':root[data-theme="dark"]': variables('dark')
      })
    )
  ]
}

// oxlint-disable-next-line import/no-default-export -- the shape Tailwind reads
export default config
