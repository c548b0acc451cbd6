// Reading chord symbols, beside the package that does part of it; and what the music code weighs.
// oxlint-disable-next-line typescript/triple-slash-reference -- the package's types are declared beside its one user
/// <reference path="../../shared/music/chord-symbol.d.ts" />
import { chordParserFactory } from 'chord-symbol/lib/chord-symbol-esm.js'
import { readChord } from '@shared/music/chord'
import { musicBundle } from './music-bundle.ts'
import { alone, compared, type Figure } from './report.ts'
import { perSecond } from './speed.ts'
import { inPairs } from './statistics.ts'

const roots = ['C', 'Db', 'D', 'Eb', 'E', 'F', 'F#', 'G', 'Ab', 'A', 'Bb', 'B']
/** Spellings that both read. */
const kinds = [
  '',
  'm',
  '7',
  'm7',
  'maj7',
  'm7b5',
  'dim7',
  '6',
  'm6',
  '9',
  '13',
  '7b9',
  '7#11',
  'sus4',
  '7alt',
  '+',
  'add9'
]

export const chordFigures = async (rounds: number): Promise<Figure[]> => {
  const symbols = roots.flatMap((root) => kinds.map((kind) => root + kind))
  const parse = chordParserFactory({ notationSystems: ['english'] })
  const refused = symbols.filter((symbol) => !readChord(symbol).ok || 'error' in parse(symbol))
  if (refused.length > 0) throw new Error(`Not read by both: ${refused.join(' ')}`)
  const ours = () => perSecond(symbols.length, () => symbols.map((symbol) => readChord(symbol)))
  const peer = () => perSecond(symbols.length, () => symbols.map((symbol) => parse(symbol)))
  const pairs = await inPairs(
    Math.max(3, rounds),
    async () => ours(),
    async () => peer()
  )
  const bundle = await musicBundle()
  const packed = `every module of shared/music in one file by the client's bundler, minified, gzipped`
  return [
    compared(
      'readChord',
      'symbols/s',
      pairs,
      `${symbols.length} different symbols over and over; peer: the parser of chord-symbol 4.0.0 alone; more is better`
    ),
    {
      ...alone('bundle of shared/music', 'kB gzipped', bundle.ours.gzip / 1000, packed, bundle),
      peer: bundle.peer.gzip / 1000,
      ratio: bundle.ours.gzip / bundle.peer.gzip
    }
  ]
}
