// Runs one of the project's commands: its stdout is the command's alone.
import { spawn } from 'node:child_process'
import { ensurePrograms } from './debian.mjs'
import { ensurePackages } from './packages.mjs'
import { root, typescript } from './paths.mjs'
import { exitOf } from './processes.mjs'
import { Trouble, checkNode, report } from './say.mjs'

const files = {
  chords: 'server/cli/chords.ts',
  stretch: 'server/cli/stretch.ts',
  bench: 'tests/bench/main.ts',
  pictures: 'server/cli/pictures.ts'
}

const main = async () => {
  checkNode()
  const [name = '', ...args] = process.argv.slice(2)
  if (!Object.hasOwn(files, name)) throw new Trouble(`Commands: ${Object.keys(files).join(', ')}.`)
  await ensurePackages()
  if (name === 'stretch') await ensurePrograms(['audio'])
  const benches = args.filter((arg) => !arg.startsWith('--'))
  if (name === 'bench' && (benches.length === 0 || benches.some((one) => ['quality', 'render'].includes(one))))
    await ensurePrograms(['rubberband', 'soundstretch'])
  const file = files[/** @type {keyof typeof files} */ (name)]
  const child = spawn(process.execPath, [...typescript(file), ...args], { cwd: root, stdio: 'inherit' })
  // The terminal's Ctrl-C reaches the command too; it decides when to end.
  process.on('SIGINT', () => {})
  process.on('SIGTERM', () => child.kill('SIGTERM'))
  return exitOf(child)
}

process.exitCode = await main().catch(report)
