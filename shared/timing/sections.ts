import { ordinal } from '@shared/music/ordinal'
import { lastAtOrBelow } from '@shared/timing/search'

/** A section of the played form: `occurrence` counts from 1 among sections of its name, `formBar` is its first bar (from 1). */
export interface SectionStart {
  name: string
  occurrence: number
  formBar: number
}

/** Bars of the played form, as laid out from a chart; one `orderIndex` for each playing of a section. */
interface LaidOutBar {
  sectionName: string
  sectionOccurrence: number
  formBar: number
  orderIndex: number
}

/** The first bar of each playing of a section, for bars in the order they are played. */
export const sectionStarts = (bars: readonly LaidOutBar[]): SectionStart[] =>
  bars
    .filter((bar, i) => bar.orderIndex !== bars[i - 1]?.orderIndex)
    .map(({ sectionName, sectionOccurrence, formBar }) => ({
      name: sectionName,
      occurrence: sectionOccurrence,
      formBar
    }))

/** The section a bar of the form is in; sections rise by `formBar`. */
export const sectionAt = (sections: readonly SectionStart[], formBar: number): SectionStart | null =>
  sections[lastAtOrBelow(sections, (section) => section.formBar, formBar)] ?? null

const WORDS = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth', 'ninth', 'tenth']

/** `B section`, `bridge`; of several alike `first A`, `second A`, `last A`; null for a section without a name. */
export const sectionWords = (section: SectionStart, sections: readonly SectionStart[]): string | null => {
  const name = section.name.trim()
  if (name === '') return null
  const alike = sections.filter((other) => other.name.trim() === name)
  if (alike.length < 2) return name.length <= 2 ? `${name} section` : name
  // Of two, "second" says as much as "last"; of more, players say "last A".
  if (alike.length > 2 && alike.at(-1)?.formBar === section.formBar) return `last ${name}`
  return `${WORDS[section.occurrence - 1] ?? ordinal(section.occurrence)} ${name}`
}

/** `2nd chorus` in a form that comes round, otherwise `2nd time through`. */
export const passWords = (pass: number, cyclic: boolean): string =>
  `${ordinal(pass)} ${cyclic ? 'chorus' : 'time through'}`
