// Work in progress lives in a folder of its own with an unguessable name and becomes visible by one rename.
import { randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { mkdir, readdir, rename, rm, symlink } from 'node:fs/promises'
import { basename, join, resolve } from 'node:path'
import { sourceName } from './ffmpeg.ts'
import { storageError } from './faults.ts'

const namePattern = /^\.work-(\d+)-(\d+)-[0-9a-f]{32}$/

/** When a process began, in clock ticks since boot: with its number it names it for good. 0 when it is gone or unknown. */
const beginning = (pid: number): number => {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The name in brackets may hold spaces; field 22 is counted from behind it (proc(5)).
    return Number(stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? 0)
  } catch {
    return 0
  }
}

const workName = (): string => `.work-${process.pid}-${beginning(process.pid)}-${randomBytes(16).toString('hex')}`

/** Makes an empty work folder inside `parent`. */
export const makeWorkFolder = async (parent: string): Promise<string> => {
  try {
    await mkdir(parent, { recursive: true })
    const folder = join(parent, workName())
    await mkdir(folder, { mode: 0o700 })
    return folder
  } catch (error) {
    throw storageError(error)
  }
}

/** Puts a recording into the folder under the one name that command lines know. */
export const linkSource = (folder: string, path: string): Promise<void> =>
  symlink(resolve(path), join(folder, sourceName))

/** Makes the finished folder visible as `outDir`; `taken` when somebody else's finished work stands there already. */
export const publishFolder = async (folder: string, outDir: string): Promise<'published' | 'taken'> => {
  try {
    await rename(folder, outDir)
  } catch (error) {
    if (error instanceof Error && 'code' in error && (error.code === 'ENOTEMPTY' || error.code === 'EEXIST'))
      return 'taken'
    throw storageError(error)
  }
  return 'published'
}

export const removeFolder = (folder: string): Promise<void> => rm(folder, { recursive: true, force: true })

const exists = (pid: number): boolean => {
  try {
    return process.kill(pid, 0)
  } catch {
    return false
  }
}

const isAlive = (name: string): boolean => {
  const [, pid, began] = namePattern.exec(name) ?? []
  if (pid === undefined) return false
  return Number(began) === 0 ? exists(Number(pid)) : beginning(Number(pid)) === Number(began)
}

/** Removes work folders directly inside `parent` whose process is gone. Safe while other workers run. Gives their number. */
export const sweepOrphans = async (parent: string): Promise<number> => {
  const entries = await readdir(parent).catch(() => [] as string[])
  const orphans = entries.filter((name) => namePattern.test(name) && !isAlive(name))
  await Promise.all(orphans.map((name) => removeFolder(join(parent, basename(name)))))
  return orphans.length
}
