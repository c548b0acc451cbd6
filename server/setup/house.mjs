// What has to stand before a server can run: packages, programs, database, tables, demo group, pages.
import path from 'node:path'
import { ensureBuild } from './build.mjs'
import { ensurePrograms } from './debian.mjs'
import { alone } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { root, storageFolder, typescript } from './paths.mjs'
import { openPostgres } from './postgres.mjs'
import { endAll, onStopRequest, run } from './processes.mjs'
import { Trouble, checkNode, note, report } from './say.mjs'

/**
 * @typedef {{ env(): NodeJS.ProcessEnv, database: import('./postgres.mjs').Database | null, moved(url: string): void }} House
 */

/** @param {string} file @param {NodeJS.ProcessEnv} env @param {string} purpose */
const step = async (file, env, purpose) => {
  const code = await run(process.execPath, typescript(file), { cwd: root, env })
  if (code !== 0) throw new Trouble(`${purpose} failed; the reason is above.`, code)
}

/** @param {(database: import('./postgres.mjs').Database) => void} onDatabase told as soon as one is open @param {boolean} isBuilt */
const prepare = async (onDatabase, isBuilt) => {
  checkNode()
  await ensurePackages()
  const given = process.env.DATABASE_URL
  await ensurePrograms(given ? ['audio'] : ['database', 'audio'])
  const storage = storageFolder()
  if (!given) note('Starting the database …')
  const database = given ? null : await openPostgres({ folder: path.join(storage, 'postgres') })
  if (database) onDatabase(database)
  let url = given ?? database?.url ?? ''
  const env = () => ({
    ...process.env,
    HOST: process.env.HOST || '127.0.0.1',
    PORT: process.env.PORT || '4300',
    STORAGE_DIR: storage,
    DATABASE_URL: url
  })
  await alone(path.join(storage, 'prepare.lock'), async () => {
    await step('server/cli/migrate.ts', env(), 'Bringing the database up to date')
    await step('server/cli/seed.ts', env(), 'Writing the demo group')
    if (isBuilt) await ensureBuild(storage)
  })
  return { env, database, moved: (/** @type {string} */ to) => void (url = to) }
}

/**
 * Prepares, runs until a request to stop or until given up, and leaves nothing running.
 * @param {{ isBuilt: boolean, open: (house: House, giveUp: (exitCode: number) => void) => void }} wish
 */
export const keepHouse = async ({ isBuilt, open }) => {
  /** @type {import('./postgres.mjs').Database | null} */
  let database = null
  let isAsked = false
  /** @type {(code: number) => void} */
  let end = () => {}
  const ended = new Promise((resolve) => (end = resolve))
  onStopRequest(() => {
    isAsked = true
    end(0)
    // Whatever is being prepared ends with its program; what follows is refused.
    void endAll()
  })
  let code = 0
  try {
    const house = await prepare((opened) => (database = opened), isBuilt)
    open(house, end)
    code = Number(await ended)
  } catch (error) {
    code = isAsked ? 0 : report(error)
  }
  await endAll()
  const opened = /** @type {import('./postgres.mjs').Database | null} */ (database)
  await opened?.close()
  process.exit(code)
}
