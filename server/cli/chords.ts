// `npm run --silent chords`: chord symbols on standard input, one line of JSON for every line, in order.
import { once } from 'node:events'
import { readChord } from '@shared/music/chord'

function answer(line: string): string {
  const read = readChord(line)
  if (!read.ok) return JSON.stringify({ error: read.error.message })
  if (read.value.noChord) return JSON.stringify({ noChord: true })
  const { root, bass, pcs, kind } = read.value
  return JSON.stringify({ root, bass, pcs, kind })
}

// Only a line feed ends a line (readline would also split at U+2028), so that answers and lines pair up.
async function* lines(): AsyncGenerator<string> {
  let open = ''
  for await (const chunk of process.stdin.setEncoding('utf8') as AsyncIterable<string>) {
    const parts = chunk.split('\n')
    parts[0] = open + (parts[0] ?? '')
    open = parts.pop() ?? ''
    yield* parts
  }
  if (open !== '') yield open
}

// Who reads us may have read enough (`| head`).
process.stdout.on('error', (error: NodeJS.ErrnoException) => process.exit(error.code === 'EPIPE' ? 0 : 1))

for await (const line of lines()) {
  // A reader that is slower than we are is waited for, so that nothing piles up in memory.
  if (!process.stdout.write(`${answer(line)}\n`)) await once(process.stdout, 'drain')
}
