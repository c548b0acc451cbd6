// One ingest in a process of its own, so that the memory it took is its own.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ingestRecording } from '@server/media/ingest'
import { type Cost, cpuSec, serveQuestions } from './processes.ts'

export interface IngestCost extends Cost {
  peakBytes: number
  /** Before anything was read. */
  restBytes: number
}

/** proc(5); what getrusage says would begin with the memory of whoever started us. */
const memory = (line: 'VmHWM' | 'VmRSS'): number =>
  Number(new RegExp(`${line}:\\s+(\\d+)`).exec(readFileSync('/proc/self/status', 'utf8'))?.[1] ?? NaN) * 1024

const measure = async (source: string): Promise<IngestCost> => {
  const folder = mkdtempSync(join(tmpdir(), 'plumbline-bench-'))
  try {
    const restBytes = memory('VmRSS')
    const before = cpuSec()
    const began = performance.now()
    const made = await ingestRecording({ source, outDir: join(folder, 'media') })
    const sec = (performance.now() - began) / 1000
    if (!made.ok) throw new Error(made.error.sentence)
    const after = cpuSec()
    const cpu = after.own - before.own + after.children - before.children
    return { sec, cpuSec: cpu, peakBytes: memory('VmHWM'), restBytes }
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

serveQuestions<{ source: string }, 'ingest'>((_question, { source }) => measure(source))
