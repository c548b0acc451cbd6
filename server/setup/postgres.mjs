// The private PostgreSQL of a folder, shared by all that open it and stopped by the last to close it.
import path from 'node:path'
import { alone, tryLock } from './lock.mjs'
import { dataFolder, ensureDatabase, ensureRunning, findRunning, openCluster, stopServer } from './postgres-cluster.mjs'

/**
 * @typedef {object} Database
 * @property {string} url for DATABASE_URL
 * @property {() => Promise<string>} revive starts it again if it died; the address, the same unless the port was taken
 * @property {() => Promise<void>} close stops it unless somebody else has it open
 */

const startLock = (/** @type {string} */ folder) => path.join(folder, 'start.lock')
const usersLock = (/** @type {string} */ folder) => path.join(folder, 'users.lock')

/**
 * @param {{ folder: string, isDurable?: boolean }} wish not durable: quick and lost with the power, for tests
 * @returns {Promise<Database>}
 */
export const openPostgres = async ({ folder, isDurable = true }) => {
  const bring = () =>
    alone(startLock(folder), async () => {
      const cluster = await openCluster(folder, isDurable)
      return { data: cluster.data, url: await ensureDatabase(cluster, await ensureRunning(cluster, isDurable)) }
    })
  // Taken before the start: whoever stops in the same moment sees that somebody needs the server.
  const use = await tryLock(usersLock(folder), { shared: true })
  const { data, url } = await bring().catch(async (error) => {
    await use?.release()
    await stopUnused(folder)
    throw error
  })
  return {
    url,
    revive: async () => (findRunning(data) ? url : (await bring()).url),
    close: async () => {
      await use?.release()
      await stopUnused(folder)
    }
  }
}

/** Stops the server of a folder if nobody has it open. @param {string} folder @returns {Promise<boolean>} whether it is unused */
export const stopUnused = (folder) =>
  alone(startLock(folder), async () => {
    const last = await tryLock(usersLock(folder), { wait: false })
    if (!last) return false
    await stopServer(dataFolder(folder))
    await last.release()
    return true
  })
