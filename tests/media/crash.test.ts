import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { existsSync, readdirSync, readlinkSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { createInterface } from 'node:readline'
import { setTimeout as sleep } from 'node:timers/promises'
import { describe, expect, it } from 'vitest'
import { ingestRecording, readIngestResult } from '@server/media/ingest.ts'
import { decode, makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'

const root = resolve(import.meta.dirname, '../..')

/** Starts an ingest in a process of its own and kills it when `isMoment` says so; true when it was still running. */
const ingestAndKill = async (source: string, outDir: string, isMoment: (step: string) => boolean): Promise<boolean> => {
  const program = join(root, 'tests/support/ingest-child.ts')
  const child = spawn(process.execPath, ['--import', 'tsx', program, source, outDir], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'inherit']
  })
  const exit = once(child, 'exit')
  for await (const step of createInterface({ input: child.stdout })) if (isMoment(step)) child.kill('SIGKILL')
  const [, signal] = (await exit) as [number | null, string | null]
  return signal === 'SIGKILL'
}

const decodingPast = (fraction: number) => (step: string) =>
  step.startsWith('decoding') && Number(step.split(' ')[1]) >= fraction

const moments: ((step: string) => boolean)[] = [
  (step) => step === 'probing 0',
  decodingPast(0.01),
  decodingPast(0.4),
  decodingPast(0.9),
  (step) => step === 'finishing 0',
  (step) => step === 'finishing 1'
]

/** Processes that work inside `folder`. */
const workingIn = (folder: string): string[] =>
  readdirSync('/proc').filter((pid) => {
    try {
      return /^\d+$/.test(pid) && readlinkSync(`/proc/${pid}/cwd`).startsWith(folder)
    } catch {
      return false
    }
  })

describe('an ingest whose process is killed', () => {
  it(
    'ends in exactly one finished result when it is run again, whenever it was killed',
    { timeout: 240_000 },
    async () => {
      const folder = scratchFolder()
      const source = makeRecording(folder, 'a.wav', pluckedBass(25))
      const outDir = join(folder, 'take', 'media')
      let killed = 0
      for (const isMoment of moments) {
        if (await ingestAndKill(source, outDir, isMoment)) killed++
        // Nothing, or a whole result: never a half of one.
        if (existsSync(outDir)) expect((await readIngestResult(outDir))?.durationSec).toBe(25)
      }
      expect(killed).toBeGreaterThanOrEqual(4)
      const made = await ingestRecording({ source, outDir })
      expect(made).toMatchObject({ ok: true, value: { durationSec: 25 } })
      expect(readdirSync(join(folder, 'take'))).toEqual(['media'])
      const pieces = made.ok ? made.value.manifest.pieces : []
      expect(readdirSync(join(outDir, 'pieces'))).toEqual(pieces.map(({ file }) => file))
      expect(decode(join(outDir, 'rendition.m4a')).length / 2).toBeGreaterThanOrEqual(25 * 44_100)
      for (let tries = 0; tries < 100 && workingIn(folder).length > 0; tries++) await sleep(100)
      expect(workingIn(folder)).toEqual([])
    }
  )
})

describe('two ingests of one take at once', () => {
  it('give the same one result', async () => {
    const folder = scratchFolder()
    const source = makeRecording(folder, 'a.wav', pluckedBass(3))
    const outDir = join(folder, 'take', 'media')
    const [first, second] = await Promise.all([
      ingestRecording({ source, outDir }),
      ingestRecording({ source, outDir })
    ])
    expect(first.ok).toBe(true)
    expect(second).toEqual(first)
    expect(readdirSync(join(folder, 'take'))).toEqual(['media'])
  })
})
