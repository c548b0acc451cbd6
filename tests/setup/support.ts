// Real processes for the tests of setting up: started, listened to, counted in /proc.
import { execFileSync, spawn, type ChildProcess, type SpawnOptions } from 'node:child_process'
import {
  chmodSync,
  cpSync,
  mkdtempSync,
  readFileSync,
  readdirSync,
  readlinkSync,
  realpathSync,
  writeFileSync
} from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import pg from 'pg'
import { expect } from 'vitest'

export const root = path.resolve(import.meta.dirname, '../..')
export const isRoot = process.getuid?.() === 0

const folders: string[] = []

/** A new empty folder outside the project, removed by `clearFolders`. */
export const newFolder = (mode = 0o755): string => {
  const folder = realpathSync(mkdtempSync(path.join(tmpdir(), 'plumbline-setup-')))
  chmodSync(folder, mode)
  folders.push(folder)
  return folder
}

/** The set-up scripts alone, where an account that may not read the project can run them. */
export const copyOfScripts = (): string => {
  const folder = newFolder()
  for (const part of ['server/setup', 'tests/setup/drivers'])
    cpSync(path.join(root, part), path.join(folder, part), { recursive: true })
  return folder
}

export const exited = (child: ChildProcess): Promise<number | null> =>
  child.exitCode !== null || child.signalCode !== null
    ? Promise.resolve(child.exitCode)
    : new Promise((resolve) => child.once('exit', (code) => resolve(code)))

const users: ChildProcess[] = []

export type DatabaseUser = { process: ChildProcess; url: string; close: () => Promise<number | null> }

/** Starts a process that opens the database in `folder`, and waits for its address. */
export const openDatabase = async (
  folder: string,
  options: SpawnOptions & { scripts?: string; isDurable?: boolean } = {}
): Promise<DatabaseUser> => {
  const { scripts = root, isDurable = false, ...rest } = options
  const driver = path.join(scripts, 'tests/setup/drivers/database-user.mjs')
  const child = spawn(process.execPath, [driver, folder, isDurable ? 'durable' : ''], {
    cwd: '/',
    ...rest,
    stdio: ['pipe', 'pipe', 'pipe']
  })
  users.push(child)
  let complaint = ''
  child.stderr?.on('data', (part: Buffer) => (complaint += part.toString()))
  const url = await new Promise<string>((resolve, reject) => {
    child.stdout?.once('data', (part: Buffer) => resolve(part.toString().trim()))
    child.once('exit', (code) => reject(new Error(`The database did not open (${code}): ${complaint}`)))
  })
  const close = () => {
    child.stdin?.write('close\n')
    return exited(child)
  }
  return { process: child, url, close }
}

/** Runs a driver or script to its end. */
export const runScript = async (
  file: string,
  args: string[],
  options: SpawnOptions = {}
): Promise<{ code: number | null; said: string }> => {
  const child = spawn(process.execPath, [file, ...args], { ...options, stdio: ['ignore', 'pipe', 'pipe'] })
  let said = ''
  for (const stream of [child.stdout, child.stderr]) stream?.on('data', (part: Buffer) => (said += part.toString()))
  const closed = new Promise((resolve) => child.once('close', resolve))
  const code = await exited(child)
  await closed
  return { code, said }
}

/** An executable shell script in `folder`, for a PATH that leads to it first. */
export const writeProgram = (folder: string, name: string, lines: string[]): void =>
  writeFileSync(path.join(folder, name), ['#!/bin/sh', ...lines, ''].join('\n'), { mode: 0o755 })

/** Runs one statement and gives its rows. */
export const query = async (url: string, sql: string): Promise<Record<string, unknown>[]> => {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    return (await client.query(sql)).rows
  } finally {
    await client.end()
  }
}

const linkOf = (pid: number): string => {
  try {
    return readlinkSync(`/proc/${pid}/cwd`)
  } catch {
    return ''
  }
}

const commandOf = (pid: number): string => {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ')
  } catch {
    return ''
  }
}

const allPids = (): number[] =>
  readdirSync('/proc')
    .map(Number)
    .filter((pid) => pid > 0)

/** Numbers of all processes that work in `folder` or name it in their command. */
export const processesOf = (folder: string): number[] =>
  allPids().filter((pid) => linkOf(pid).startsWith(folder) || commandOf(pid).includes(folder))

/** Postmasters of a database folder: the one whose command names the data. */
export const postmastersOf = (folder: string): number[] =>
  processesOf(folder).filter((pid) => commandOf(pid).includes(`postgres -D ${folder}/data`))

/** Numbers of the node processes that run `script` of the project in `folder`. */
export const processNamed = (folder: string, script: string): number[] =>
  allPids().filter((pid) => commandOf(pid).includes(path.join(folder, script)))
/** Waits for something to become true; the test's own time limit is the only deadline. */
export const until = async (isTrue: () => boolean | Promise<boolean>): Promise<void> => {
  while (!(await isTrue())) await sleep(50)
}

const killIfThere = (pid: number): void => {
  try {
    process.kill(pid, 'SIGKILL')
  } catch {
    // It ended by itself in this moment.
  }
}

/** Takes the place of `cpSync` for thousands of files: owners and rights are kept, in a quarter of the time. */
export const copyFolder = (from: string, to: string): void => {
  execFileSync('cp', ['-a', from, to])
}

/** Kills what a failed test left, and removes the folders: by a process that nobody waits for, as disks take seconds. */
export const clearFolders = async (): Promise<void> => {
  for (const child of users.splice(0)) child.kill('SIGKILL')
  for (const folder of folders.splice(0)) {
    await until(() => {
      const left = processesOf(folder)
      for (const pid of left) killIfThere(pid)
      return left.length === 0
    })
    spawn('rm', ['-rf', folder], { detached: true, stdio: 'ignore' }).unref()
  }
}

/** Fails with the commands of what is still there. */
export const expectNothingLeft = (folder: string): void => {
  expect(processesOf(folder).map(commandOf)).toEqual([])
}
