import { spawn, type ChildProcess } from 'node:child_process'
import { cpSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import net from 'node:net'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterAll, afterEach, describe, expect, it } from 'vitest'
import {
  clearFolders,
  copyFolder,
  exited,
  expectNothingLeft,
  newFolder,
  postmastersOf,
  processesOf,
  processNamed,
  root,
  until
} from './support.ts'

/** A project of the same shape, whose server, worker and pages are as small as can be. */
const fillProject = (folder: string): void => {
  cpSync(path.join(root, 'tests/setup/miniature'), folder, { recursive: true })
  cpSync(path.join(root, 'server/setup'), path.join(folder, 'server/setup'), { recursive: true })
  for (const file of ['package.json', 'package-lock.json']) cpSync(path.join(root, file), path.join(folder, file))
  symlinkSync(path.join(root, 'node_modules'), path.join(folder, 'node_modules'))
}
const newProject = (): string => {
  const folder = newFolder()
  fillProject(folder)
  return folder
}

const freePort = (): Promise<string> =>
  new Promise((resolve) => {
    const server = net.createServer().listen(0, '127.0.0.1', () => {
      const address = server.address()
      server.close(() => resolve(typeof address === 'object' ? String(address?.port) : ''))
    })
  })

type Start = { process: ChildProcess; port: string; said: () => string; isUp: () => Promise<void> }

const start = async (project: string, port?: string): Promise<Start> => {
  const chosen = port ?? (await freePort())
  const { DATABASE_URL: _url, STORAGE_DIR: _storage, npm_lifecycle_event: _npm, ...env } = process.env
  const script = path.join(project, 'server/setup/start.mjs')
  const child = spawn(process.execPath, [script], {
    cwd: project,
    env: { ...env, PORT: chosen },
    stdio: ['ignore', 'pipe', 'pipe']
  })
  let text = ''
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (part: Buffer) => (text += part.toString()))
  const isUp = () =>
    until(() => {
      if (child.exitCode !== null) throw new Error(`It ended with ${child.exitCode}: ${text}`)
      return text.includes('Ctrl-C')
    })
  return { process: child, port: chosen, said: () => text, isUp }
}

const isWell = (port: string) =>
  fetch(`http://127.0.0.1:${port}/healthz`)
    .then((answer) => answer.ok)
    .catch(() => false)

/** Starts a new project once for the whole file: its first start, with database and pages to make, takes most of the time. */
let beforehand: Promise<{ project: string; said: string }> | null = null
const startBeforehand = async () => {
  const project = path.join(mkdtempSync(path.join(tmpdir(), 'plumbline-setup-')), 'project')
  fillProject(project)
  const run = await start(project)
  await run.isUp()
  run.process.kill('SIGINT')
  await exited(run.process)
  return { project, said: run.said() }
}
const startedBefore = async () => {
  const { project, said } = await (beforehand ??= startBeforehand())
  const copy = path.join(newFolder(), 'project')
  copyFolder(project, copy)
  return { project: copy, said }
}
afterAll(async () => {
  const made = await beforehand?.catch(() => null)
  if (made) rmSync(path.dirname(made.project), { recursive: true, force: true, maxRetries: 5 })
})
afterEach(clearFolders)

describe('npm start', () => {
  it('says where it is and who may sign in, keeps everything running, and stops on Ctrl-C without remains', async () => {
    const { project } = await startedBefore()
    const folder = path.join(project, 'storage/postgres')
    const first = await start(project)
    await first.isUp()
    expect(first.said()).toContain(`http://127.0.0.1:${first.port}`)
    expect(first.said()).toContain('ada@harbour.example')
    expect(first.said()).toContain('a-password-for-show')
    expect(await isWell(first.port)).toBe(true)

    const [worker = 0] = processNamed(project, 'server/worker.ts')
    process.kill(worker, 'SIGKILL')
    await until(() => processNamed(project, 'server/worker.ts').some((pid) => pid !== worker))
    // The dead worker's child went with it: one sleeper for the living one.
    await until(
      () =>
        processesOf(project).filter((pid) => readFileSync(`/proc/${pid}/comm`, 'utf8').trim() === 'sleep').length === 1
    )

    const [server = 0] = processNamed(project, 'server/main.ts')
    process.kill(server, 'SIGKILL')
    await until(() => processNamed(project, 'server/main.ts').some((pid) => pid !== server))
    await until(() => isWell(first.port))

    const [postmaster = 0] = postmastersOf(folder)
    process.kill(postmaster, 'SIGKILL')
    await until(() => postmastersOf(folder).some((pid) => pid !== postmaster))

    first.process.kill('SIGINT')
    expect(await exited(first.process)).toBe(0)
    expectNothingLeft(project)
  })

  it('runs twice at once on one database, each stopping only what is its own', async () => {
    const project = newProject()
    const folder = path.join(project, 'storage/postgres')
    const [first, second] = await Promise.all([start(project), start(project)])
    await Promise.all([first.isUp(), second.isUp()])
    expect(postmastersOf(folder)).toHaveLength(1)
    expect(readFileSync(path.join(project, 'storage/seeded'), 'utf8')).toBe('once more\nonce more\n')
    first.process.kill('SIGTERM')
    expect(await exited(first.process)).toBe(0)
    expect(await isWell(second.port)).toBe(true)
    expect(postmastersOf(folder)).toHaveLength(1)
    second.process.kill('SIGINT')
    expect(await exited(second.process)).toBe(0)
    expectNothingLeft(project)
  })

  it('builds the pages again only when their sources changed', async () => {
    const { project, said } = await startedBefore()
    expect(said).toContain('Building')
    expect(existsSync(path.join(project, 'storage/build/index.html'))).toBe(true)
    const once = async () => {
      const run = await start(project)
      await run.isUp()
      run.process.kill('SIGINT')
      await exited(run.process)
      return run.said().includes('Building')
    }
    expect(await once()).toBe(false)
    // git keeps no empty folder, so the miniature may come without this one.
    mkdirSync(path.join(project, 'client'), { recursive: true })
    writeFileSync(path.join(project, 'client/new.ts'), 'export {}\n')
    expect(await once()).toBe(true)
  })

  it('lets nothing but the database outlive kill -9, and the next start takes that over', async () => {
    const { project } = await startedBefore()
    const folder = path.join(project, 'storage/postgres')
    const first = await start(project)
    await first.isUp()
    const before = postmastersOf(folder)
    first.process.kill('SIGKILL')
    await until(
      () => processNamed(project, 'server/main.ts').length + processNamed(project, 'server/worker.ts').length === 0
    )
    const second = await start(project)
    await second.isUp()
    expect(postmastersOf(folder)).toEqual(before)
    second.process.kill('SIGINT')
    expect(await exited(second.process)).toBe(0)
    expectNothingLeft(project)
  })

  it('ends with 78, tried once, when the configuration is at fault', async () => {
    const { project } = await startedBefore()
    const run = await start(project, 'faulty')
    expect(await exited(run.process)).toBe(78)
    expect(run.said()).not.toContain('started again')
    expectNothingLeft(project)
  })

  it('stops quietly while it is still preparing', async () => {
    const project = newProject()
    const run = await start(project)
    await until(() => run.said().includes('database'))
    run.process.kill('SIGINT')
    expect(await exited(run.process)).toBe(0)
    expectNothingLeft(project)
  })
})
