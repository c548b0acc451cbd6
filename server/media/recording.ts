// Joins what a browser's recorder sent while it recorded, piece by piece, into one file that can be ingested.
import { createReadStream } from 'node:fs'
import { open, rename, rm, stat, type FileHandle } from 'node:fs/promises'
import { err, ok, type Result } from '@shared/result.ts'
import { mediaFault, storageError, type MediaFault } from './faults.ts'
import { readHead } from './file-head.ts'

export type JoinOptions = {
  /** Paths of the pieces in the order of their numbers; a number that never arrived is undefined. */
  pieces: readonly (string | undefined)[]
  target: string
  maxBytes: number
  signal?: AbortSignal
}

const ebml = Buffer.from([0x1a, 0x45, 0xdf, 0xa3])

/** Whether a recorder began here: WebM's head, or MP4's file type box. Later pieces carry on without one. */
const isBeginning = (head: Buffer): boolean =>
  head.subarray(0, 4).equals(ebml) || head.toString('latin1', 4, 8) === 'ftyp'

const check = async (pieces: JoinOptions['pieces'], maxBytes: number): Promise<Result<string[], MediaFault>> => {
  const paths = pieces.filter((path) => path !== undefined)
  if (paths.length === 0) return err(mediaFault('empty'))
  if (paths.length !== pieces.length) return err(mediaFault('incomplete'))
  const heads = await Promise.all(paths.map(readHead))
  if (!isBeginning(heads[0] ?? Buffer.alloc(0))) return err(mediaFault(heads[0]?.length === 0 ? 'empty' : 'incomplete'))
  // A second beginning is another recording: joined, everything after it would be lost silently.
  if (heads.slice(1).some(isBeginning)) return err(mediaFault('incomplete'))
  const sizes = await Promise.all(paths.map(async (path) => (await stat(path)).size))
  const bytes = sizes.reduce((sum, size) => sum + size, 0)
  return bytes > maxBytes ? err(mediaFault('too-large')) : ok(paths)
}

const appendAll = async (target: FileHandle, paths: string[], signal: AbortSignal | undefined): Promise<number> => {
  let bytes = 0
  for (const path of paths) {
    for await (const chunk of createReadStream(path, { signal }) as AsyncIterable<Buffer>) {
      await target.appendFile(chunk)
      bytes += chunk.length
    }
  }
  return bytes
}

/** Joins the pieces into `target`, which appears whole or not at all. The pieces stay; whoever calls removes them. */
export const joinRecording = async (options: JoinOptions): Promise<Result<{ bytes: number }, MediaFault>> => {
  const { pieces, target, maxBytes, signal } = options
  const checked = await check(pieces, maxBytes)
  if (!checked.ok) return checked
  const beside = `${target}.part`
  try {
    const file = await open(beside, 'w', 0o600)
    const bytes = await appendAll(file, checked.value, signal).finally(() => file.close())
    await rename(beside, target)
    return ok({ bytes })
  } catch (error) {
    await rm(beside, { force: true })
    throw storageError(error)
  }
}
