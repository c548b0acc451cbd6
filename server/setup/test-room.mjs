// A place for tests and measurements: storage, database server and port of their own, gone afterwards.
import fs from 'node:fs'
import path from 'node:path'
import { ensureBuild } from './build.mjs'
import { tryLock } from './lock.mjs'
import { root } from './paths.mjs'
import { openPostgres, stopUnused } from './postgres.mjs'

const rooms = path.join(root, 'storage', 'test')
const roomLock = (/** @type {string} */ folder) => `${folder}.lock`

/** Rooms whose user was killed are cleared by the next one. */
const clearAbandoned = async () => {
  const folders = fs.readdirSync(rooms, { withFileTypes: true }).filter((entry) => entry.isDirectory())
  for (const { name } of folders) {
    const folder = path.join(rooms, name)
    const lock = await tryLock(roomLock(folder), { wait: false })
    if (lock) await clear(folder)
    await lock?.release()
  }
}

/** @param {string} folder */
const clear = async (folder) => {
  const postgres = path.join(folder, 'postgres')
  if (fs.existsSync(postgres)) await stopUnused(postgres)
  fs.rmSync(folder, { recursive: true, force: true, maxRetries: 5 })
  fs.rmSync(roomLock(folder), { force: true })
}

/**
 * @param {{ database?: boolean, build?: boolean }} [wish] by default with a database and without pages
 * @returns {Promise<{ folder: string, env: Record<string, string>, close(): Promise<void> }>}
 */
export const openTestRoom = async ({ database = true, build = false } = {}) => {
  fs.mkdirSync(rooms, { recursive: true })
  await clearAbandoned()
  const folder = path.join(rooms, `${process.pid}-${Date.now().toString(36)}`)
  const use = await tryLock(roomLock(folder))
  fs.mkdirSync(folder)
  const close = async () => {
    await opened?.close()
    await clear(folder)
    await use?.release()
  }
  /** @type {import('./postgres.mjs').Database | null} */
  let opened = null
  try {
    if (database) opened = await openPostgres({ folder: path.join(folder, 'postgres'), isDurable: false })
    if (build) await ensureBuild(folder)
  } catch (error) {
    await close()
    throw error
  }
  return { folder, env: { STORAGE_DIR: folder, ...(opened ? { TEST_DATABASE_URL: opened.url } : {}) }, close }
}
