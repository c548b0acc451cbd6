import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import path from 'node:path'
import { afterEach, describe, expect, it } from 'vitest'
import { clearFolders, copyOfScripts, newFolder, runScript, writeProgram } from './support.ts'

const tonal = (version: string) => ({ 'node_modules/tonal': { version } })
const lockOf = (packages: Record<string, unknown>) =>
  JSON.stringify({ packages: { '': { name: 'plumbline' }, ...packages } })
/** What npm leaves in node_modules: the same without the project itself. */
const installedOf = (packages: Record<string, unknown>) => JSON.stringify({ packages })

/** A project whose npm writes down its calls and installs by copying the lock, as npm does last of all. */
const newProject = () => {
  const project = copyOfScripts()
  const bin = newFolder()
  const calls = path.join(bin, 'calls')
  writeFileSync(calls, '')
  writeProgram(bin, 'npm', [
    `echo "$*" >> ${calls}`,
    'sleep 0.3',
    'rm -rf node_modules && mkdir -p node_modules',
    `[ -e ${bin}/broken ] && exit 1`,
    'cp package-lock.json node_modules/.package-lock.json'
  ])
  const env = { ...process.env, PATH: `${bin}:${process.env['PATH']}` }
  return {
    project,
    bin,
    lock: (text: string) => writeFileSync(path.join(project, 'package-lock.json'), text),
    installed: (text: string) => {
      mkdirSync(path.join(project, 'node_modules'), { recursive: true })
      writeFileSync(path.join(project, 'node_modules/.package-lock.json'), text)
    },
    calls: () => readFileSync(calls, 'utf8').split('\n').filter(Boolean),
    ensure: () => runScript(path.join(project, 'tests/setup/drivers/packages-user.mjs'), [], { env })
  }
}

afterEach(clearFolders)

describe('packages', () => {
  it('are installed from the lock once, though two ask at the same moment, and again when the lock changes', async () => {
    const { lock, ensure, calls } = newProject()
    lock(lockOf(tonal('6.5.1')))
    const codes = (await Promise.all([ensure(), ensure()])).map((run) => run.code)
    expect(codes).toEqual([0, 0])
    expect(calls()).toHaveLength(1)
    expect(calls()[0]).toMatch(/^ci /)
    lock(lockOf(tonal('6.5.2')))
    await ensure()
    await ensure()
    expect(calls()).toHaveLength(2)
  })

  it('are left alone when npm install put them there, packages for other machines missing', async () => {
    const { lock, installed, ensure, calls } = newProject()
    lock(lockOf({ ...tonal('6.5.1'), 'node_modules/for-another-system': { version: '1.0.0', optional: true } }))
    installed(installedOf(tonal('6.5.1')))
    expect((await ensure()).code).toBe(0)
    expect(calls()).toEqual([])
  })

  it('are installed when one is missing or more are there than asked for', async () => {
    const { lock, installed, ensure, calls } = newProject()
    lock(lockOf({ ...tonal('6.5.1'), 'node_modules/zod': { version: '4.6.7' } }))
    installed(installedOf(tonal('6.5.1')))
    await ensure()
    expect(calls()).toHaveLength(1)
    lock(lockOf(tonal('6.5.1')))
    await ensure()
    expect(calls()).toHaveLength(2)
  })

  it('are tried again after an installation that failed', async () => {
    const { bin, lock, ensure, calls } = newProject()
    lock(lockOf(tonal('6.5.1')))
    writeFileSync(path.join(bin, 'broken'), '')
    const failed = await ensure()
    expect(failed.code).toBe(1)
    expect(failed.said).toContain('could not be installed')
    await ensure()
    expect(calls()).toHaveLength(2)
  })
})
