import fs from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import { keepHouse } from './house.mjs'
import { packageFile, root, typescript } from './paths.mjs'
import { note } from './say.mjs'
import { supervise } from './supervise.mjs'

const watched = ['server', 'shared', 'migrations']
const lookEveryMs = 500

/** Times of change, asked for rather than listened for: editors that replace files escape fs.watch. @param {string} folder @returns {string[]} */
const changes = (folder) =>
  fs.readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const place = path.join(folder, entry.name)
    return entry.isDirectory() ? changes(place) : [`${place} ${fs.statSync(place, { throwIfNoEntry: false })?.mtimeMs}`]
  })

/** @returns {Promise<number>} */
const freePort = () =>
  new Promise((resolve, reject) => {
    const server = net.createServer()
    server.once('error', reject)
    server.listen(0, '127.0.0.1', () => {
      const address = server.address()
      server.close(() => resolve(address && typeof address === 'object' ? address.port : 0))
    })
  })

const apiPort = String(await freePort())

void keepHouse({
  isBuilt: false,
  open: ({ env }, giveUp) => {
    const { HOST = '', PORT = '' } = env()
    const apiEnv = () => ({ ...env(), HOST: '127.0.0.1', PORT: apiPort, PLUMBLINE_DEV: '1' })
    const pagesEnv = () => ({ ...env(), PLUMBLINE_DEV_API: `http://127.0.0.1:${apiPort}` })
    const server = supervise({ name: 'server', args: typescript('server/main.ts'), env: apiEnv })
    const worker = supervise({ name: 'worker', args: typescript('server/worker.ts'), env: apiEnv })
    const vite = [
      packageFile('vite/bin/vite.js'),
      '--host',
      HOST,
      '--port',
      PORT,
      '--strictPort',
      '--clearScreen',
      'false'
    ]
    // Vite ends by itself only when it cannot start.
    supervise({
      name: 'page server',
      args: vite,
      env: pagesEnv,
      onListening: () => {},
      onGiveUp: giveUp
    })

    const look = () => watched.flatMap((name) => changes(path.join(root, name))).join('\n')
    let seen = look()
    setInterval(() => {
      const now = look()
      if (now === seen) return
      seen = now
      note('A file changed: server and worker start again.')
      void Promise.all([server.restart(), worker.restart()])
    }, lookEveryMs)
  }
})
