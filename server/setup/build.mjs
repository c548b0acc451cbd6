// The browser's part, built only when something it is made of changed.
import { createHash } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { packageFile, root } from './paths.mjs'
import { run } from './processes.mjs'
import { Trouble, note } from './say.mjs'

const sources = [
  'client',
  'shared',
  'index.html',
  'vite.config.ts',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json'
]

/** @param {string} place @returns {string[]} files in it, in a fixed order */
const filesIn = (place) => {
  if (!fs.existsSync(place)) return []
  if (!fs.statSync(place).isDirectory()) return [place]
  const names = fs.readdirSync(place).sort()
  return names.flatMap((name) => filesIn(path.join(place, name)))
}

const fingerprint = () => {
  const hash = createHash('sha256')
  for (const file of sources.flatMap((name) => filesIn(path.join(root, name)))) {
    hash.update(`${path.relative(root, file)}\0`).update(fs.readFileSync(file))
  }
  return hash.digest('hex')
}

/** @param {string} storage folder that gets `build`; callers hold a lock on it */
export const ensureBuild = async (storage) => {
  const target = path.join(storage, 'build')
  const mark = path.join(storage, 'build.sha256')
  const wanted = fingerprint()
  const isBuilt = fs.existsSync(path.join(target, 'index.html')) && fs.existsSync(mark)
  if (isBuilt && fs.readFileSync(mark, 'utf8') === wanted) return
  note('Building …')
  const fresh = `${target}.new`
  const args = [packageFile('vite/bin/vite.js'), 'build', '--outDir', fresh, '--emptyOutDir', '--logLevel', 'warn']
  const code = await run(process.execPath, args, { cwd: root, env: { ...process.env, NODE_ENV: 'production' } })
  if (code !== 0) throw new Trouble('The pages could not be built; the reason is above.')
  // A server that is running goes on serving whole files.
  fs.rmSync(target, { recursive: true, force: true })
  fs.renameSync(fresh, target)
  fs.writeFileSync(mark, wanted)
}
