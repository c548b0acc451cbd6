import { spawnSync } from 'node:child_process'
import { describe, expect, it } from 'vitest'

const answers = (input: string): unknown[] => {
  const run = spawnSync(process.execPath, ['--import', 'tsx', 'server/cli/chords.ts'], {
    input,
    encoding: 'utf8',
    maxBuffer: 64 * 1024 ** 2
  })
  expect(run.stderr).toBe('')
  return run.stdout
    .split('\n')
    .slice(0, -1)
    .map((line): unknown => JSON.parse(line))
}

describe('the chords command', { timeout: 60_000 }, () => {
  it('answers every line in order, with root and bass counted from C and the rest from the root', () => {
    expect(answers('Ebm7b5/A\r\nN.C.\n\nhello\nG7')).toEqual([
      { root: 3, bass: 9, pcs: [0, 3, 6, 10], kind: 'half-diminished' },
      { noChord: true },
      { error: expect.stringMatching(/\w/) },
      { error: expect.stringMatching(/hello/) },
      { root: 7, bass: null, pcs: [0, 4, 7, 10], kind: 'dominant' }
    ])
  })

  it('keeps pace with long input, long lines and odd line separators', () => {
    const many = Array.from({ length: 20_000 }, () => 'Dm7')
    const found = answers(['C\u2028G', 'x'.repeat(300_000), ...many, ''].join('\n'))
    expect(found).toHaveLength(20_002)
    expect(found.slice(0, 2)).toEqual([{ error: expect.any(String) }, { error: expect.any(String) }])
    expect(found.at(-1)).toEqual({ root: 2, bass: null, pcs: [0, 3, 7, 10], kind: 'minor' })
  })

  it('says nothing to nothing', () => {
    expect(answers('')).toEqual([])
  })
})
