// Where recordings lie. Names inside it are made by the server alone; what comes from outside is only ever a checked id.
import { createReadStream } from 'node:fs'
import { copyFile, mkdir, open, readdir, rename, rm, stat } from 'node:fs/promises'
import { dirname, isAbsolute, join, relative, resolve } from 'node:path'
import type { Readable } from 'node:stream'
import { storageError } from './faults.ts'
import { peaksFile, piecesFolder } from './ingest.ts'
import { renditionFile } from './commands.ts'
import { sweepOrphans } from './work-folder.ts'

/** What of a take can be served. `piece` counts from 0. */
export type TakePart = { kind: 'original' | 'rendition' | 'peaks' } | { kind: 'piece'; piece: number }

/** Half-open range of bytes. */
export type StoredRange = { start: number; end: number }

export type StoredFile = {
  bytes: number
  /** Changes whenever the content may have changed; fit for an ETag. */
  tag: string
  modifiedMs: number
  read: (range?: StoredRange) => Readable
}

export type MediaStorage = {
  /** Where an upload in progress may be written: one folder for all, swept of what is old. */
  incomingFolder: () => Promise<string>
  /** Takes a finished upload over as the take's original. Doing it twice with the same take replaces the first. */
  keepOriginal: (takeId: string, uploaded: string) => Promise<{ bytes: number }>
  /** Paths that an ingest reads and writes. */
  ingestPaths: (takeId: string) => { source: string; outDir: string }
  /** The file of a part, or none. */
  find: (takeId: string, part: TakePart) => Promise<StoredFile | undefined>
  /** Where a part lies, whether it is there or not: for answers that express sends with ranges. */
  pathOf: (takeId: string, part: TakePart) => string
  /** Where the file of a clip of a take lies, or will. */
  clipPath: (takeId: string, clipId: string) => string
  removeClip: (takeId: string, clipId: string) => Promise<void>
  /** The clips that have a file older than `olderThanMs`. */
  clips: (now: number, olderThanMs: number) => Promise<{ takeId: string; clipId: string }[]>
  /** Ids of the takes that have a folder untouched for `olderThanMs`. */
  takeIds: (now: number, olderThanMs: number) => Promise<string[]>
  /** Removes everything of a take, also what an ingest has begun. */
  removeTake: (takeId: string) => Promise<void>
  /** Removes leftovers of dead ingests and uploads older than `uploadsOlderThanMs`; gives their number. */
  sweep: (now: number, uploadsOlderThanMs: number) => Promise<number>
  /** Bytes a take occupies. */
  bytesOf: (takeId: string) => Promise<number>
}

const uuid = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/

/** `parts` under `root`, or none when the result would lie anywhere else (ASVS V5.3.2). */
export const resolveInside = (root: string, ...parts: string[]): string | undefined => {
  if (parts.some((part) => part.includes('\0') || part.includes('\\') || isAbsolute(part))) return undefined
  const path = resolve(root, ...parts)
  const inside = relative(resolve(root), path)
  return inside === '' || inside.startsWith('..') || isAbsolute(inside) ? undefined : path
}

/** Inside a take's folder; a clip is kept under its id, whatever its format. */
const clipsFolder = 'clips'

const missingCodes = new Set(['ENOENT', 'ENOTDIR'])
const codeOf = (error: unknown): string => (error instanceof Error && 'code' in error ? String(error.code) : '')

const noneIfMissing = (error: unknown): undefined => {
  if (missingCodes.has(codeOf(error))) return undefined
  throw storageError(error)
}

/** Renames, or copies where the upload lies on another file system; the target appears whole either way. */
const moveFile = async (from: string, to: string): Promise<void> => {
  try {
    await rename(from, to)
  } catch (error) {
    if (codeOf(error) !== 'EXDEV') throw error
    const beside = `${to}.part`
    await copyFile(from, beside)
    await rename(beside, to)
    await rm(from)
  }
}

const pieceFile = (piece: number): string => `${String(Math.trunc(piece)).padStart(5, '0')}.ogg`

/** What is acknowledged survives a power cut: the bytes, then the name, are on the disk. */
const sync = async (path: string): Promise<void> => {
  const handle = await open(path, 'r')
  await handle.sync().finally(() => handle.close())
}

const fileOfPart = (part: TakePart): string[] => {
  if (part.kind === 'piece') return ['media', piecesFolder, pieceFile(part.piece)]
  if (part.kind === 'original') return ['original']
  return ['media', part.kind === 'rendition' ? renditionFile : peaksFile]
}

const openStored = async (path: string): Promise<StoredFile | undefined> => {
  const found = await stat(path, { bigint: true }).catch(noneIfMissing)
  if (found === undefined || !found.isFile()) return undefined
  return {
    bytes: Number(found.size),
    tag: `${found.size.toString(36)}-${found.mtimeNs.toString(36)}`,
    modifiedMs: Number(found.mtimeMs),
    read: (range) => createReadStream(path, range && { start: range.start, end: range.end - 1 })
  }
}

const folderBytes = async (folder: string): Promise<number> => {
  const entries = await readdir(folder, { withFileTypes: true, recursive: true }).catch(noneIfMissing)
  const files = (entries ?? []).filter((entry) => entry.isFile())
  const sizes = await Promise.all(files.map(async (file) => (await stat(join(file.parentPath, file.name))).size))
  return sizes.reduce((sum, size) => sum + size, 0)
}

/** Storage in a local folder: `takes/<id>/original`, `takes/<id>/media/...`, `takes/<id>/clips/<clip id>`, `incoming/...`. */
export const createLocalStorage = (root: string): MediaStorage => {
  const takes = join(root, 'takes')
  const incoming = join(root, 'incoming')

  const inTake = (takeId: string, ...parts: string[]): string => {
    const path = uuid.test(takeId) ? resolveInside(takes, takeId, ...parts) : undefined
    if (path === undefined) throw new Error('Not a take id')
    return path
  }

  const sweepUploads = async (before: number): Promise<number> => {
    const names = (await readdir(incoming).catch(noneIfMissing)) ?? []
    const old = await Promise.all(
      names.map(async (name) => ((await stat(join(incoming, name))).mtimeMs < before ? name : undefined))
    )
    const gone = old.filter((name) => name !== undefined)
    await Promise.all(gone.map((name) => rm(join(incoming, name), { recursive: true, force: true })))
    return gone.length
  }

  const clipPath = (takeId: string, clipId: string): string => {
    if (!uuid.test(clipId)) throw new Error('Not a clip id')
    return inTake(takeId, clipsFolder, clipId)
  }

  return {
    clipPath,
    removeClip: (takeId, clipId) => rm(clipPath(takeId, clipId), { force: true }),
    async clips(now, olderThanMs) {
      const takeIds = ((await readdir(takes).catch(noneIfMissing)) ?? []).filter((id) => uuid.test(id))
      const found = await Promise.all(
        takeIds.map(async (takeId) => {
          const ids = ((await readdir(inTake(takeId, clipsFolder)).catch(noneIfMissing)) ?? []).filter((id) =>
            uuid.test(id)
          )
          const ages = await Promise.all(
            ids.map(async (id) => now - ((await stat(clipPath(takeId, id)).catch(noneIfMissing))?.mtimeMs ?? now))
          )
          return ids.filter((_, at) => (ages[at] ?? 0) > olderThanMs).map((clipId) => ({ takeId, clipId }))
        })
      )
      return found.flat()
    },
    async incomingFolder() {
      await mkdir(incoming, { recursive: true, mode: 0o700 })
      return incoming
    },
    async keepOriginal(takeId, uploaded) {
      const target = inTake(takeId, 'original')
      try {
        await mkdir(dirname(target), { recursive: true, mode: 0o700 })
        await sync(uploaded)
        await moveFile(uploaded, target)
        await sync(dirname(target))
        return { bytes: (await stat(target)).size }
      } catch (error) {
        throw storageError(error)
      }
    },
    ingestPaths: (takeId) => ({ source: inTake(takeId, 'original'), outDir: inTake(takeId, 'media') }),
    find: (takeId, part) =>
      uuid.test(takeId) ? openStored(inTake(takeId, ...fileOfPart(part))) : Promise.resolve(undefined),
    pathOf: (takeId, part) => inTake(takeId, ...fileOfPart(part)),
    async takeIds(now, olderThanMs) {
      const ids = ((await readdir(takes).catch(noneIfMissing)) ?? []).filter((id) => uuid.test(id))
      const old = await Promise.all(ids.map(async (id) => now - (await stat(join(takes, id))).mtimeMs > olderThanMs))
      return ids.filter((_, index) => old[index])
    },
    removeTake: (takeId) => rm(inTake(takeId), { recursive: true, force: true }),
    async sweep(now, uploadsOlderThanMs) {
      const ids = (await readdir(takes).catch(noneIfMissing)) ?? []
      const swept = await Promise.all(ids.map((id) => sweepOrphans(join(takes, id))))
      return swept.reduce((sum, count) => sum + count, await sweepUploads(now - uploadsOlderThanMs))
    },
    bytesOf: (takeId) => folderBytes(inTake(takeId))
  }
}
