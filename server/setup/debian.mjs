// Programs that come from the system, not from npm, and how Debian gets them.
import fs from 'node:fs'
import path from 'node:path'
import { run } from './processes.mjs'
import { Trouble, note } from './say.mjs'

const isProgram = (/** @type {string} */ name) =>
  (process.env.PATH ?? '/usr/bin:/bin').split(':').some((folder) => folder && fs.existsSync(path.join(folder, name)))

/** Server programs of PostgreSQL are not in PATH on Debian. @returns {string[]} folders, newest version first */
export const postgresFolders = () => {
  const base = '/usr/lib/postgresql'
  const versions = fs.existsSync(base) ? fs.readdirSync(base) : []
  return versions
    .sort((a, b) => Number(b) - Number(a))
    .map((version) => path.join(base, version, 'bin'))
    .filter((folder) => fs.existsSync(path.join(folder, 'postgres')) && fs.existsSync(path.join(folder, 'psql')))
}

/** @type {Record<string, { package: string, isThere: () => boolean }>} */
const needs = {
  database: { package: 'postgresql', isThere: () => postgresFolders().length > 0 },
  audio: { package: 'ffmpeg', isThere: () => isProgram('ffmpeg') && isProgram('ffprobe') },
  measures: { package: 'aubio-tools', isThere: () => isProgram('aubiopitch') && isProgram('aubioonset') },
  rubberband: { package: 'rubberband-cli', isThere: () => isProgram('rubberband') },
  soundstretch: { package: 'soundstretch', isThere: () => isProgram('soundstretch') },
  browser: { package: 'chromium', isThere: () => isProgram('chromium') }
}

/**
 * Debian's PostgreSQL makes and starts a cluster of its own when first installed. Ours is private, so that one is
 * asked not to be made, for this installation only.
 * @template T
 * @param {() => Promise<T>} install
 */
const withoutMainCluster = async (install) => {
  const folder = '/etc/postgresql-common/createcluster.d'
  const file = path.join(folder, 'plumbline-install.conf')
  fs.mkdirSync(folder, { recursive: true })
  fs.writeFileSync(file, 'create_main_cluster = false\n')
  try {
    return await install()
  } finally {
    fs.rmSync(file, { force: true })
  }
}

/**
 * Installs what is missing as root, else says the one command that does.
 * @param {('database' | 'audio' | 'measures' | 'rubberband' | 'soundstretch' | 'browser')[]} names
 */
export const ensurePrograms = async (names) => {
  const missing = () => names.map((name) => needs[name]).filter((need) => need && !need.isThere())
  const packages = missing().map((need) => need?.package ?? '')
  if (packages.length === 0) return
  const install = ['install', '-y', '--no-install-recommends', ...packages]
  const command = `apt-get update && apt-get ${install.join(' ')}`
  if (!isProgram('apt-get')) throw new Trouble(`Please install first: ${packages.join(', ')}.`)
  if (process.getuid?.() !== 0) {
    throw new Trouble(
      `Some programs are missing. Please run this once, then start again:\n\n  sudo sh -c '${command}'\n`
    )
  }
  note(`Installing ${packages.join(', ')} …`)
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  // Another apt at work is waited for, and a slow mirror tried again.
  const patience = ['-qq', '-o', 'DPkg::Lock::Timeout=300', '-o', 'Acquire::Retries=3']
  await run('apt-get', [...patience, 'update'], { env })
  const go = () => run('apt-get', [...patience, ...install], { env })
  await (packages.includes('postgresql') ? withoutMainCluster(go) : go())
  const still = missing().map((need) => need?.package)
  if (still.length > 0) throw new Trouble(`Still missing: ${still.join(', ')}. Please run: ${command}`)
}
