import { existsSync, readFileSync } from 'node:fs'
import path from 'node:path'
import { afterEach, describe, expect, it } from 'vitest'
import { clearFolders, copyOfScripts, isRoot, newFolder, runScript, writeProgram } from './support.ts'

const driver = (scripts: string) => path.join(scripts, 'tests/setup/drivers/programs-user.mjs')

/** A PATH with nothing but an apt-get that writes down its calls and, asked to install, does what `installs` says. */
const emptyMachine = (installs: string[]) => {
  const folder = newFolder(0o777)
  const calls = path.join(folder, 'calls')
  writeProgram(folder, 'apt-get', [
    `echo "$DEBIAN_FRONTEND $*" >> ${calls}`,
    `case "$*" in *install*) : ; ${installs.join('; ')} ;; esac`
  ])
  return { folder, calls: () => (existsSync(calls) ? readFileSync(calls, 'utf8') : ''), env: { PATH: folder } }
}
const making = (folder: string) => [`: > ${folder}/ffmpeg`, `: > ${folder}/ffprobe`]

afterEach(clearFolders)

describe('programs of the system', () => {
  it.skipIf(!isRoot)('are installed by root without questions, once (skipped: needs root)', async () => {
    const programs = newFolder()
    const machine = emptyMachine(making(programs))
    const env = { PATH: `${machine.folder}:${programs}` }
    const scripts = copyOfScripts()
    expect((await runScript(driver(scripts), ['audio'], { env })).code).toBe(0)
    expect(machine.calls()).toMatch(
      /^noninteractive .*update\nnoninteractive .*install -y --no-install-recommends ffmpeg\n$/
    )
    const before = machine.calls()
    expect((await runScript(driver(scripts), ['audio'], { env })).code).toBe(0)
    expect(machine.calls()).toBe(before)
  })

  it.skipIf(!isRoot)(
    'are asked for by name when the installation did not bring them (skipped: needs root)',
    async () => {
      const machine = emptyMachine([])
      const { code, said } = await runScript(driver(copyOfScripts()), ['audio'], { env: machine.env })
      expect(code).toBe(1)
      expect(said).toContain('Still missing: ffmpeg')
    }
  )

  it('are told to an ordinary user as one command, and nothing is tried', async () => {
    const machine = emptyMachine([])
    // nobody of Debian's base-passwd, where we may become it.
    const account = isRoot ? { uid: 65534, gid: 65534 } : {}
    const { code, said } = await runScript(driver(copyOfScripts()), ['audio', 'browser'], {
      env: machine.env,
      ...account
    })
    expect(code).toBe(1)
    expect(said).toContain("sudo sh -c 'apt-get update && apt-get install -y --no-install-recommends ffmpeg chromium'")
    expect(machine.calls()).toBe('')
  })
})
