// Locks that the kernel gives up when their holder dies, so none is ever stale. Node has no flock(2): a `cat` of
// util-linux's flock holds it for as long as our end of its input is open, which no other child inherits.
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { Trouble } from './say.mjs'

/**
 * @typedef {{ release(): Promise<void> }} Lock
 * @typedef {{ shared?: boolean, wait?: boolean }} Wish
 */

/**
 * @param {string} file made when missing @param {Wish} [wish] by default exclusive, waiting for its turn
 * @returns {Promise<Lock | null>} null only when not waiting and somebody else holds it
 */
export const tryLock = (file, { shared = false, wait = true } = {}) => {
  fs.mkdirSync(path.dirname(file), { recursive: true })
  const kind = [shared ? '-s' : '-x', ...(wait ? [] : ['-n'])]
  const holder = spawn('flock', ['-F', ...kind, file, 'sh', '-c', 'echo held; exec cat >/dev/null'], {
    detached: true,
    stdio: ['pipe', 'pipe', 'pipe']
  })
  const gone = new Promise((resolve) => holder.once('exit', resolve))
  let complaint = ''
  holder.stderr.on('data', (/** @type {Buffer} */ part) => (complaint += part))
  holder.stdin.on('error', () => {})
  return new Promise((resolve, reject) => {
    holder.once('error', (error) => reject(new Trouble(`The program flock (util-linux) is needed: ${error.message}`)))
    holder.stdout.once('data', () => {
      const release = async () => {
        holder.ref()
        holder.stdin.end()
        await gone
      }
      // An open lock must not keep us alive.
      holder.unref()
      for (const stream of [holder.stdin, holder.stdout, holder.stderr]) {
        if ('unref' in stream && typeof stream.unref === 'function') stream.unref()
      }
      resolve({ release })
    })
    holder.once('close', () =>
      complaint ? reject(new Trouble(`Cannot lock ${file}: ${complaint.trim()}`)) : resolve(null)
    )
  })
}

/**
 * @template T
 * @param {string} file @param {() => Promise<T>} work done by one process at a time
 * @returns {Promise<T>}
 */
export const alone = async (file, work) => {
  const lock = await tryLock(file)
  try {
    return await work()
  } finally {
    await lock?.release()
  }
}
