// Pitch and attacks as aubio (Debian's aubio-tools) hears them.
import { execFileSync } from 'node:child_process'

/** Median over the whole file. A window of 8192 holds a dozen periods of a low tone. */
export const pitchByAubio = (path: string): number => {
  const lines = execFileSync('aubiopitch', ['-i', path, '-p', 'yinfft', '-B', '8192', '-H', '2048'], {
    encoding: 'utf8'
  })
  const found = lines
    .split('\n')
    .map((line) => Number(line.split(/\s+/)[1]))
    .filter((hertz) => hertz > 0)
  return found.sort((a, b) => a - b)[found.length >> 1] ?? NaN
}

/** Seconds. */
export const onsetsByAubio = (path: string): number[] =>
  execFileSync('aubioonset', ['-i', path, '-O', 'energy', '-H', '64', '-B', '512', '-M', '0.1'], { encoding: 'utf8' })
    .trim()
    .split('\n')
    .map(Number)
