import { createHash } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { alone } from './lock.mjs'
import { root } from './paths.mjs'
import { run } from './processes.mjs'
import { Trouble, note } from './say.mjs'

const lockFile = path.join(root, 'package-lock.json')
const modules = path.join(root, 'node_modules')
const mark = path.join(modules, '.cache', 'package-lock.sha256')

const wanted = () => createHash('sha256').update(fs.readFileSync(lockFile)).digest('hex')
const read = (/** @type {string} */ file) => (fs.existsSync(file) ? fs.readFileSync(file, 'utf8') : '')

const setMark = () => {
  fs.mkdirSync(path.dirname(mark), { recursive: true })
  fs.writeFileSync(mark, wanted())
}

/** npm writes down what it installed, last of all: packages put there by hand with `npm install` need no second go. */
const isSameAsInstalled = () => {
  const installed = read(path.join(modules, '.package-lock.json'))
  if (!installed) return false
  /** @type {Record<string, { version?: string, optional?: boolean }>} */
  const there = JSON.parse(installed).packages
  const asked = JSON.parse(read(lockFile)).packages
  delete asked['']
  const hasAll = Object.keys(asked).every((name) =>
    there[name] ? there[name].version === asked[name].version : asked[name].optional === true
  )
  return hasAll && Object.keys(there).every((name) => name in asked)
}

const isReady = () => {
  if (read(mark) === wanted()) return true
  if (!isSameAsInstalled()) return false
  setMark()
  return true
}

/** Installs exactly what package-lock.json says, unless it is there. */
export const ensurePackages = async () => {
  if (isReady()) return
  await alone(path.join(root, 'storage', 'packages.lock'), async () => {
    if (isReady()) return
    note('Installing packages …')
    // Vite and its plugins are needed to build, whatever NODE_ENV says.
    const code = await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], { cwd: root })
    if (code !== 0) throw new Trouble('The packages could not be installed; npm says why above.')
    setMark()
  })
}
