// Shapes of the chart document. Reading and typesetting chords: chord.ts; the edits: chart-document.ts.

/** One section as written: its letter or name and the text typed for each bar (`Dm7`, `Em7b5 A7`, `%`, `N.C.`, or empty). */
export interface ChartSection {
  id: string
  name: string
  bars: string[]
}

/** Body of a tune's chart document. Text stays as typed; chords, transposition and typesetting are derived. */
export interface ChartBody {
  /** `G minor`, `B♭ major`, or empty while unknown. */
  key: string
  /** `4/4`, `3/4`, `6/8` … */
  meter: string
  tempo: { min: number; max: number } | null
  /** True when the played form comes round again (chorus after chorus); false for a song from start to end. */
  cyclic: boolean
  /** The written form. */
  sections: ChartSection[]
  /** The played order: ids of sections, repeats allowed (A A B A). */
  order: string[]
}
