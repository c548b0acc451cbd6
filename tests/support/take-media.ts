// One small recording, really ingested once a run; takes of the tests get copies of what came out.
import { existsSync, mkdirSync, renameSync, rmSync } from 'node:fs'
import { cp } from 'node:fs/promises'
import { randomBytes } from 'node:crypto'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ingestRecording, type IngestResult, readIngestResult } from '@server/media/ingest'
import { makeRecording, pluckedBass } from './media.ts'

/** Told in the file's tags: must never reach anybody who may not hear the take. */
export const taggedPlace = '+59.9139+010.7522/'
export const mediaSeconds = 12

const madeOnce = (): string => join(process.env['STORAGE_DIR'] ?? tmpdir(), 'test-take')

const make = async (): Promise<string> => {
  const folder = madeOnce()
  if (existsSync(folder)) return folder
  const draft = `${folder}-${randomBytes(4).toString('hex')}`
  mkdirSync(draft, { recursive: true })
  const tags = ['-metadata', `location=${taggedPlace}`, '-metadata', 'artist=Somebody Private']
  const made = makeRecording(draft, 'recording.m4a', pluckedBass(mediaSeconds), '-c:a', 'aac', '-b:a', '64k', ...tags)
  renameSync(made, join(draft, 'original'))
  const result = await ingestRecording({ source: join(draft, 'original'), outDir: join(draft, 'media') })
  if (!result.ok) throw new Error(result.error.sentence)
  try {
    renameSync(draft, folder)
  } catch {
    // Another test file was quicker.
    rmSync(draft, { recursive: true, force: true })
  }
  return folder
}

/** Puts the recording and all that was made of it where the storage expects those of a take. */
export const giveMedia = async (storageDir: string, takeId: string): Promise<IngestResult> => {
  const folder = await make()
  await cp(folder, join(storageDir, 'takes', takeId), { recursive: true })
  const result = await readIngestResult(join(folder, 'media'))
  if (!result) throw new Error('the recording of the tests was not ingested')
  return result
}
