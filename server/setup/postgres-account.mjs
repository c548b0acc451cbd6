// PostgreSQL refuses to run as root. As root it is told that it is somebody else.
import fs from 'node:fs'
import path from 'node:path'
import { capture } from './processes.mjs'
import { Trouble } from './say.mjs'

/**
 * How the programs of PostgreSQL are called: words put before the command, and the account they run under.
 * @typedef {{ before: string[], account: { uid: number, gid: number } | null }} Account
 */

/** Root that calls itself 1000 inside a namespace keeps root's rights to the folder, even below a closed home. */
const namespace = ['unshare', '--user', '--map-user=1000', '--map-group=1000']

/** @param {string} name @returns {{ uid: number, gid: number } | null} */
const accountNamed = (name) => {
  const line = fs
    .readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((text) => text.startsWith(`${name}:`))
  const [, , uid, gid] = line?.split(':') ?? []
  return uid && gid ? { uid: Number(uid), gid: Number(gid) } : null
}

/** @param {string} folder of the data, perhaps not there yet @returns {Promise<Account>} */
export const chooseAccount = async (folder) => {
  const me = process.getuid?.() ?? 0
  const owner = fs.existsSync(folder) ? fs.statSync(folder) : null
  if (me !== 0) {
    if (owner && owner.uid !== me) {
      throw new Trouble(
        `${folder} belongs to another account. Start as that account, or set STORAGE_DIR to a folder of your own.`
      )
    }
    return { before: [], account: null }
  }
  if (owner && owner.uid !== 0) return { before: [], account: { uid: owner.uid, gid: owner.gid } }
  const [program = '', ...rest] = namespace
  const trial = await capture(program, [...rest, 'true'])
  if (trial.code === 0) return { before: namespace, account: null }
  const account = accountNamed('postgres')
  if (account && canReach(path.dirname(folder), account)) return { before: [], account }
  throw new Trouble(
    [
      `PostgreSQL cannot run as root here: user namespaces are off (${trial.output}), and the account "postgres" cannot`,
      `reach ${folder}. One of these helps: start as an ordinary user; put the project or STORAGE_DIR below a folder`,
      'that everybody may enter; or give DATABASE_URL of a server that runs already.'
    ].join('\n')
  )
}

/** @param {string} folder @param {{ uid: number, gid: number }} account @returns {boolean} whether it may enter every folder on the way */
const canReach = (folder, { uid, gid }) => {
  const { uid: owner, gid: group, mode } = fs.statSync(folder)
  const isOpen = (mode & (owner === uid ? 0o100 : group === gid ? 0o010 : 0o001)) !== 0
  return isOpen && (folder === '/' || canReach(path.dirname(folder), { uid, gid }))
}
