// npm test: types, lint, format, then every test, on a database, port and folder of their own.
import fs from 'node:fs'
import path from 'node:path'
import { ensurePrograms } from './debian.mjs'
import { ensurePackages } from './packages.mjs'
import { packageFile, root } from './paths.mjs'
import { capture, endAll, onStopRequest, run } from './processes.mjs'
import { checkNode, note, report } from './say.mjs'
import { openTestRoom } from './test-room.mjs'

/** @typedef {{ passed: number, failed: number, skipped: number }} Count */

// Journeys are two projects, `e2e` and `e2e-alone`: who asks for the one wants both.
const args = process.argv
  .slice(2)
  .map((arg, at, all) => (arg === '--project=e2e' || (arg === 'e2e' && all[at - 1] === '--project') ? `${arg}*` : arg))
const shown = { cwd: root, stdio: /** @type {['ignore', 'inherit', 'inherit']} */ (['ignore', 'inherit', 'inherit']) }

const checks = [
  { name: 'types', script: 'typescript/bin/tsc', args: ['-b'] },
  { name: 'lint', script: 'oxlint/bin/oxlint', args: [] },
  { name: 'format', script: 'prettier/bin/prettier.cjs', args: ['--check', '--log-level', 'warn', '.'] }
]

/** The projects that the arguments name, by `--project` or by path; null when they leave all in. */
const projects = () => {
  const named = args.flatMap((arg, at) => {
    if (arg.startsWith('--project=')) return [arg.slice('--project='.length)]
    return arg === '--project' ? [args[at + 1] ?? ''] : []
  })
  const inPaths = args.flatMap((arg) => /(?:^|\/)tests\/([a-z0-9]+)/.exec(arg)?.[1] ?? [])
  return named.length > 0 ? named : inPaths.length > 0 ? inPaths : null
}

const nothing = () => ({ passed: 0, failed: 0, skipped: 0 })

/** All at once, each saying what it has to say when it is done. @returns {Promise<Count>} one for each check */
const runChecks = async () => {
  const count = nothing()
  const runs = checks.map(async (check) => {
    const { code, output } = await capture(process.execPath, [packageFile(check.script), ...check.args], { cwd: root })
    if (output) console.log(output)
    note(`${check.name}: ${code === 0 ? 'passed' : 'FAILED'}`)
    count[code === 0 ? 'passed' : 'failed']++
  })
  await Promise.all(runs)
  return count
}

/** @param {string} file vitest's JSON report @param {number} code its exit code @returns {Count} */
const countTests = (file, code) => {
  if (!fs.existsSync(file)) return { ...nothing(), failed: 1 }
  const result = JSON.parse(fs.readFileSync(file, 'utf8'))
  /** @type {{ status: string, assertionResults: { status: string }[] }[]} */
  const files = result.testResults
  const broken = files.filter(
    (one) => one.status === 'failed' && one.assertionResults.every((test) => test.status !== 'failed')
  )
  const failed = result.numFailedTests + broken.length
  return {
    passed: result.numPassedTests,
    // Something went wrong outside any test: that counts as well.
    failed: failed === 0 && code !== 0 ? 1 : failed,
    skipped: result.numPendingTests + result.numTodoTests
  }
}

/** @param {{ folder: string, env: Record<string, string> }} room @returns {Promise<Count>} */
const runTests = async (room) => {
  const file = path.join(room.folder, 'results.json')
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${file}`]
  const { DATABASE_URL: _, ...env } = { ...process.env, ...room.env }
  const code = await run(process.execPath, [packageFile('vitest/vitest.mjs'), 'run', ...reporters, ...args], {
    ...shown,
    env
  })
  return countTests(file, code)
}

const main = async () => {
  checkNode()
  await ensurePackages()
  const wanted = projects()
  const has = (/** @type {string[]} */ ...names) =>
    !wanted || names.some((name) => wanted.some((one) => one.startsWith(name)))
  await ensurePrograms([
    'database',
    'audio',
    ...(has('media') ? /** @type {const} */ (['measures']) : []),
    ...(has('e2e', 'client') ? /** @type {const} */ (['browser']) : [])
  ])
  const checking = wanted ? Promise.resolve(nothing()) : runChecks()
  // A stop in the middle is told by what is waited for first.
  checking.catch(() => {})
  const room = await openTestRoom({ database: has('api', 'realtime', 'media', 'e2e'), build: has('e2e') })
  const [checked, tested] = await checking
    .then(async (found) => /** @type {const} */ ([found, await runTests(room)]))
    .finally(async () => {
      await endAll()
      await room.close()
    })
  const [passed, failed] = [checked.passed + tested.passed, checked.failed + tested.failed]
  console.log(`${passed} passed, ${failed} failed${tested.skipped ? `, ${tested.skipped} skipped` : ''}`)
  return failed > 0 ? 1 : 0
}

onStopRequest(() => void endAll())
process.exitCode = await main().catch(report)
