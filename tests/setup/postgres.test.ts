import { spawn } from 'node:child_process'
import { chmodSync, chownSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import net from 'node:net'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import {
  clearFolders,
  copyFolder,
  copyOfScripts,
  exited,
  expectNothingLeft,
  isRoot,
  newFolder,
  openDatabase,
  postmastersOf,
  processesOf,
  query,
  writeProgram
} from './support.ts'

/** The account `nobody` of Debian's base-passwd. */
const nobody = { uid: 65534, gid: 65534 }
const portOf = (url: string) => Number(new URL(url).port)
const postmasterFile = (folder: string) => path.join(folder, 'data/postmaster.pid')

/** Made once: initdb takes most of the time of a test. */
let template = ''
const folderWithData = () => {
  const folder = path.join(newFolder(), 'postgres')
  copyFolder(template, folder)
  return folder
}

beforeAll(async () => {
  template = path.join(mkdtempSync(path.join(tmpdir(), 'plumbline-setup-')), 'postgres')
  const user = await openDatabase(template)
  await user.close()
})
afterAll(() => rmSync(path.dirname(template), { recursive: true, force: true }))
afterEach(clearFolders)

describe('the private database', () => {
  it('answers on loopback only, asks for its password and keeps it from others', async () => {
    const folder = folderWithData()
    const user = await openDatabase(folder)
    expect(await query(user.url, 'show listen_addresses')).toEqual([{ listen_addresses: '127.0.0.1' }])
    expect(await query(user.url, 'show unix_socket_directories')).toEqual([{ unix_socket_directories: '' }])
    const wrong = new URL(user.url)
    wrong.password = 'wrong'
    await expect(query(wrong.href, 'select 1')).rejects.toThrow('password authentication failed')
    expect(statSync(path.join(folder, 'password')).mode & 0o777).toBe(0o600)
    await user.close()
  })

  it('stops with the last that has it open and leaves nothing running', async () => {
    const folder = folderWithData()
    const user = await openDatabase(folder)
    expect(await user.close()).toBe(0)
    expectNothingLeft(folder)
  })

  it('keeps data, address and password from one start to the next', async () => {
    const folder = folderWithData()
    const first = await openDatabase(folder)
    await query(first.url, "create table takes as select 'Blue line' as title")
    await first.close()
    const second = await openDatabase(folder)
    expect(second.url).toBe(first.url)
    expect(await query(second.url, 'select title from takes')).toEqual([{ title: 'Blue line' }])
    await second.close()
  })

  it('is one server for starts at the same moment, and outlives the first to close it', async () => {
    const folder = path.join(newFolder(), 'postgres')
    const users = await Promise.all([openDatabase(folder), openDatabase(folder), openDatabase(folder)])
    const [first, second, third] = users
    expect(new Set(users.map((user) => user.url)).size).toBe(1)
    expect(postmastersOf(folder)).toHaveLength(1)
    const before = postmastersOf(folder)
    await first?.close()
    // One that is killed gives up its share without saying so.
    third?.process.kill('SIGKILL')
    expect(await query(second?.url ?? '', 'select 1 as one')).toEqual([{ one: 1 }])
    expect(postmastersOf(folder)).toEqual(before)
    await second?.close()
    expectNothingLeft(folder)
  })

  it('is taken over, still running, after its only user was killed', async () => {
    const folder = folderWithData()
    const first = await openDatabase(folder)
    const before = postmastersOf(folder)
    first.process.kill('SIGKILL')
    await exited(first.process)
    const second = await openDatabase(folder)
    expect(postmastersOf(folder)).toEqual(before)
    await second.close()
    expectNothingLeft(folder)
  })

  it('comes back with its data after kill -9 of the server, its children still there', async () => {
    const folder = folderWithData()
    const first = await openDatabase(folder, { isDurable: true })
    await query(first.url, 'create table takes as select 1 as id')
    const [postmaster = 0] = postmastersOf(folder)
    // Stopped children cannot notice that their postmaster died, and hold on to its memory.
    const children = processesOf(folder).filter((pid) =>
      readFileSync(`/proc/${pid}/stat`, 'utf8').includes(` ${postmaster} `)
    )
    expect(children.length).toBeGreaterThan(0)
    for (const pid of children) process.kill(pid, 'SIGSTOP')
    process.kill(postmaster, 'SIGKILL')
    first.process.kill('SIGKILL')
    await exited(first.process)
    const second = await openDatabase(folder, { isDurable: true })
    expect(await query(second.url, 'select id from takes')).toEqual([{ id: 1 }])
    expect(postmastersOf(folder)).not.toContain(postmaster)
    await second.close()
    expectNothingLeft(folder)
  })

  it('does not believe a process number that passed to somebody else', async () => {
    const folder = folderWithData()
    const first = await openDatabase(folder)
    const [postmaster = 0] = postmastersOf(folder)
    const told = readFileSync(postmasterFile(folder), 'utf8')
    await first.close()
    // A living stranger, at work in the very data folder: only its name tells.
    const stranger = spawn('sleep', ['600'], { cwd: path.join(folder, 'data'), stdio: 'ignore' })
    writeFileSync(postmasterFile(folder), told.replace(String(postmaster), String(stranger.pid)))
    const second = await openDatabase(folder)
    expect(await query(second.url, 'select 1 as one')).toEqual([{ one: 1 }])
    await second.close()
    expect(stranger.exitCode).toBeNull()
    expect(stranger.signalCode).toBeNull()
    stranger.kill()
    await exited(stranger)
  })

  it('moves to another port when its own was taken meanwhile', async () => {
    const folder = folderWithData()
    const first = await openDatabase(folder)
    await first.close()
    const squatter = net.createServer()
    await new Promise<void>((resolve) => squatter.listen(portOf(first.url), '127.0.0.1', resolve))
    const second = await openDatabase(folder)
    expect(portOf(second.url)).not.toBe(portOf(first.url))
    await second.close()
    await new Promise((resolve) => squatter.close(resolve))
  })

  it('begins anew when the making of its data was interrupted', async () => {
    const folder = path.join(newFolder(), 'postgres')
    mkdirSync(path.join(folder, 'data.new/base'), { recursive: true })
    writeFileSync(path.join(folder, 'data.new/PG_VERSION'), '15\n')
    const user = await openDatabase(folder)
    expect(await query(user.url, 'select 1 as one')).toEqual([{ one: 1 }])
    await user.close()
  })
})

describe('the accounts it runs under', () => {
  it.skipIf(!isRoot)('works for root below a closed home (skipped: needs root)', async () => {
    const home = newFolder(0o700)
    const folder = path.join(home, 'plumbline/storage/postgres')
    const user = await openDatabase(folder)
    expect(await query(user.url, 'select 1 as one')).toEqual([{ one: 1 }])
    await user.close()
    expectNothingLeft(home)
  })

  it.skipIf(!isRoot)('works for an ordinary user (skipped: needs root to become one)', async () => {
    const scripts = copyOfScripts()
    const home = newFolder(0o700)
    chownSync(home, nobody.uid, nobody.gid)
    const folder = path.join(home, 'postgres')
    const user = await openDatabase(folder, { scripts, ...nobody })
    expect(await query(user.url, 'select 1 as one')).toEqual([{ one: 1 }])
    const [postmaster = 0] = postmastersOf(folder)
    expect(statSync(`/proc/${postmaster}`).uid).toBe(nobody.uid)
    await user.close()
    expectNothingLeft(home)
  })

  it.skipIf(!isRoot)('falls back to the account postgres where namespaces are off (skipped: needs root)', async () => {
    const open = newFolder()
    const folder = path.join(open, 'storage/postgres')
    // A machine without user namespaces, as far as the scripts can see.
    writeProgram(open, 'unshare', ['echo "unshare failed: Operation not permitted" >&2', 'exit 1'])
    const env = { ...process.env, PATH: `${open}:${process.env.PATH}` }
    const first = await openDatabase(folder, { env })
    expect(await query(first.url, 'select 1 as one')).toEqual([{ one: 1 }])
    await first.close()
    // The data stays with that account when namespaces are on again.
    const second = await openDatabase(folder)
    expect(second.url).toBe(first.url)
    await second.close()
    expectNothingLeft(folder)
    chmodSync(open, 0o700)
    const closed = path.join(open, 'other/postgres')
    await expect(openDatabase(closed, { env })).rejects.toThrow('DATABASE_URL')
  })
})
