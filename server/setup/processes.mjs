// Child processes in groups of their own: a Ctrl-C in the terminal reaches only us, and we end them in order.
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { Trouble } from './say.mjs'

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set()
let stopping = false

/** @param {number} pid @param {NodeJS.Signals | 0} signal @returns {boolean} whether anything was there */
export const signalGroup = (pid, signal) => {
  try {
    process.kill(-pid, signal)
    return true
  } catch {
    return false
  }
}

/**
 * Starts a program in a process group of its own.
 * @param {string} command @param {string[]} args @param {import('node:child_process').SpawnOptions} [options]
 */
export const spawnGroup = (command, args, options = {}) => {
  if (stopping) throw new Trouble('Stopped.', 0)
  const child = spawn(command, args, { ...options, detached: true })
  running.add(child)
  child.once('exit', () => running.delete(child))
  child.once('error', () => running.delete(child))
  return child
}

/** @param {import('node:child_process').ChildProcess} child @returns {Promise<number>} exit code; 1 when it was killed or not found */
export const exitOf = (child) =>
  new Promise((resolve) => {
    child.once('exit', (code) => resolve(code ?? 1))
    child.once('error', () => resolve(1))
  })

/**
 * Runs a program to its end, its output shown on stderr.
 * @param {string} command @param {string[]} args @param {import('node:child_process').SpawnOptions} [options]
 */
export const run = (command, args, options = {}) =>
  exitOf(spawnGroup(command, args, { stdio: ['ignore', 2, 2], ...options }))

/**
 * Runs a program to its end and keeps what it says.
 * @param {string} command @param {string[]} args @param {import('node:child_process').SpawnOptions} [options]
 * @returns {Promise<{ code: number, output: string }>}
 */
export const capture = async (command, args, options = {}) => {
  const child = spawnGroup(command, args, { ...options, stdio: ['ignore', 'pipe', 'pipe'] })
  let output = ''
  child.stdout?.on('data', (/** @type {Buffer} */ part) => (output += part))
  child.stderr?.on('data', (/** @type {Buffer} */ part) => (output += part))
  child.once('error', (error) => (output += error.message))
  const closed = new Promise((resolve) => child.once('close', resolve))
  const code = await exitOf(child)
  if (child.pid) await closed
  return { code, output: output.trim() }
}

/**
 * Ends a child and everything in its group: asked first, then made to.
 * @param {import('node:child_process').ChildProcess} child @param {number} [patienceMs]
 */
export const endGroup = async (child, patienceMs = 6000) => {
  const { pid } = child
  if (!pid) return
  signalGroup(pid, 'SIGTERM')
  const deadline = Date.now() + patienceMs
  while (signalGroup(pid, 0) && Date.now() < deadline) await sleep(25)
  signalGroup(pid, 'SIGKILL')
}

export const isStopping = () => stopping

/** Ends all that was started here; nothing new can be started afterwards. */
export const endAll = async () => {
  stopping = true
  await Promise.all([...running].map((child) => endGroup(child)))
}

/** @param {number} pid @param {string} what a link or file in /proc/PID @returns {string} empty when gone or not ours to see */
const look = (pid, what) => {
  try {
    const place = `/proc/${pid}/${what}`
    return what === 'cwd' ? fs.readlinkSync(place) : fs.readFileSync(place, 'utf8').trim()
  } catch {
    return ''
  }
}

/** Whether a process is a program of that name working in that folder: a number alone may have passed to somebody else. */
export const isAtWork = (/** @type {number} */ pid, /** @type {string} */ program, /** @type {string} */ folder) =>
  look(pid, 'cwd') === folder && look(pid, 'comm') === program

/** @param {string} program @param {string} folder real path @returns {number[]} process numbers */
export const atWork = (program, folder) =>
  fs
    .readdirSync('/proc')
    .map(Number)
    .filter((pid) => pid > 0 && isAtWork(pid, program, folder))

/**
 * Calls `stop` once on the first request to end, however it comes. A second one kills what is left.
 * @param {() => void} stop
 */
export const onStopRequest = (stop) => {
  let asked = false
  const ask = () => {
    if (asked) for (const child of running) if (child.pid) signalGroup(child.pid, 'SIGKILL')
    if (!asked) stop()
    asked = true
  }
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, ask)
  // npm killed outright passes no signal on; its disappearance is the request.
  const parent = process.ppid
  if (!process.env.npm_lifecycle_event) return
  setInterval(() => process.ppid !== parent && !asked && ask(), 500).unref()
}
