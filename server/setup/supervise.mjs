// Keeps a program of ours running.
import path from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { root } from './paths.mjs'
import { endGroup, exitOf, isStopping, signalGroup, spawnGroup } from './processes.mjs'
import { note } from './say.mjs'

/** Exit code of a program whose configuration is at fault (EX_CONFIG of sysexits.h): starting it again cannot help. */
export const configFault = 78

const guard = path.join(root, 'server', 'setup', 'end-with-parent.mjs')
const firstPauseMs = 250
const longestPauseMs = 10_000
const healthyMs = 60_000
const startsBeforeListening = 3

/**
 * @typedef {object} Wish
 * @property {string} name said in messages
 * @property {string[]} args of node
 * @property {() => NodeJS.ProcessEnv} env read anew at each start
 * @property {(address: string) => void} [onListening] given: a program that never gets there is given up
 * @property {(exitCode: number) => void} [onGiveUp] absent: waits for `restart`, as in development
 */

/** @param {Wish} wish */
export const supervise = ({ name, args, env, onListening, onGiveUp }) => {
  let isAsked = false
  let hasListened = false
  let wake = () => {}
  /** @type {import('node:child_process').ChildProcess | null} */
  let child = null

  /** One life of the program. @returns {Promise<number>} its exit code */
  const live = async () => {
    isAsked = false
    const current = spawnGroup(process.execPath, ['--import', guard, ...args], {
      cwd: root,
      env: env(),
      stdio: ['ignore', 'inherit', 'inherit', 'ipc']
    })
    child = current
    current.on('message', (/** @type {{ type?: string, address?: string }} */ message) => {
      if (message?.type !== 'listening' || !message.address) return
      hasListened = true
      onListening?.(message.address)
    })
    const code = await exitOf(current)
    // A killed worker leaves its ffmpeg behind.
    if (current.pid) signalGroup(current.pid, 'SIGKILL')
    child = null
    return code
  }

  const asked = () => new Promise((resolve) => (wake = () => resolve(undefined)))

  const keep = async () => {
    let pauseMs = firstPauseMs
    for (let starts = 1; !isStopping(); starts++) {
      const since = Date.now()
      const code = await live()
      if (isStopping()) return
      if (isAsked) continue
      if (!onGiveUp) {
        note(`The ${name} ended (${code}); it starts again when a file changes.`)
        await asked()
        continue
      }
      if (code === configFault) return onGiveUp(code)
      if (onListening && !hasListened && starts >= startsBeforeListening) return onGiveUp(1)
      pauseMs = Date.now() - since > healthyMs ? firstPauseMs : Math.min(pauseMs * 2, longestPauseMs)
      note(`The ${name} ended (${code}) and is started again.`)
      await sleep(pauseMs)
    }
  }

  void keep()
  return {
    /** Ends the program; the next life begins at once. */
    restart: async () => {
      isAsked = true
      wake()
      if (child) await endGroup(child)
    }
  }
}
