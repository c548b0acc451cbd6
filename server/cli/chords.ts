// `npm run --silent chords`: chord symbols on standard input, one line of JSON for every line, in order.
import { createInterface } from 'node:readline'
import { once } from 'node:events'
import { readChord } from '@shared/music/chord'

function answer(line: string): string {
  const read = readChord(line)
  if (!read.ok) return JSON.stringify({ error: read.error.message })
  if (read.value.noChord) return JSON.stringify({ noChord: true })
  const { root, bass, pcs, kind } = read.value
  return JSON.stringify({ root, bass, pcs, kind })
}

for await (const line of createInterface({ input: process.stdin, crlfDelay: Infinity })) {
  // A reader that is slower than we are is waited for, so that nothing piles up in memory.
  if (!process.stdout.write(`${answer(line)}\n`)) await once(process.stdout, 'drain')
}
