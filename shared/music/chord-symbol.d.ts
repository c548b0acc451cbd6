// The bundled build of chord-symbol 4.0.0, the only one that loads in Node and in a browser alike, ships without types.
// Only what chord.ts reads of it is declared here.
declare module 'chord-symbol/lib/chord-symbol-esm.js' {
  interface ReadSymbol {
    input: { modifiers: string[] }
    normalized: { intervals: string[] }
  }

  export function chordParserFactory(settings: {
    notationSystems: ('english' | 'german' | 'latin')[]
  }): (symbol: string) => ReadSymbol | { error: unknown[] }
}
