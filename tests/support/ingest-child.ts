// A process that ingests one recording and tells each step on standard output, to be killed at any of them.
import { ingestRecording } from '@server/media/ingest.ts'

const [source = '', outDir = ''] = process.argv.slice(2)
const result = await ingestRecording({
  source,
  outDir,
  onProgress: (stage, fraction) => process.stdout.write(`${stage} ${fraction}\n`)
})
process.exitCode = result.ok ? 0 : 1
