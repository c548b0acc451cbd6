import fs from 'node:fs'
import http from 'node:http'
import https from 'node:https'
import path from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { keepHouse } from './house.mjs'
import { root, typescript } from './paths.mjs'
import { note, report } from './say.mjs'
import { supervise } from './supervise.mjs'

/** @param {string} address @returns {Promise<boolean>} whatever its certificate: it is our own server */
const isHealthy = (address) =>
  new Promise((resolve) => {
    const url = new URL('/healthz', address)
    const get = url.protocol === 'https:' ? https.get : http.get
    const request = get(url, { rejectUnauthorized: false, timeout: 2000 }, (answer) => {
      answer.resume()
      resolve(answer.statusCode === 200)
    })
    request.once('timeout', () => request.destroy())
    request.once('error', () => resolve(false))
  })

const signIns = () => {
  const file = path.join(root, 'seeds', 'demo-sign-ins.json')
  if (!fs.existsSync(file)) return []
  /** @type {{ name: string, email: string, password: string, role: string }[]} */
  const people = JSON.parse(fs.readFileSync(file, 'utf8'))
  const width = (/** @type {'name' | 'email' | 'password'} */ key) =>
    Math.max(...people.map((person) => person[key].length))
  const pad = (/** @type {(typeof people)[number]} */ person, /** @type {'name' | 'email' | 'password'} */ key) =>
    person[key].padEnd(width(key))
  const lines = people.map((one) => `  ${pad(one, 'name')}  ${pad(one, 'email')}  ${pad(one, 'password')}  ${one.role}`)
  return ['', 'Sign in to the demo group as one of these (name, address, password, part):', ...lines]
}

/** @param {string} address */
const announce = async (address) => {
  while (!(await isHealthy(address))) await sleep(100)
  console.log(['', `Plumbline is at ${address}`, ...signIns(), '', 'Ctrl-C stops it; everything is kept.'].join('\n'))
}

void keepHouse({
  isBuilt: true,
  open: ({ env, database, moved }, giveUp) => {
    let isAnnounced = false
    const onListening = (/** @type {string} */ address) => {
      if (!isAnnounced) void announce(address)
      isAnnounced = true
    }
    const server = supervise({ name: 'server', args: typescript('server/main.ts'), env, onListening, onGiveUp: giveUp })
    const worker = supervise({ name: 'worker', args: typescript('server/worker.ts'), env, onGiveUp: giveUp })
    if (!database) return

    /** A database server that was killed comes back; if its port was taken meanwhile, ours learn the new one. */
    const watch = async () => {
      const url = await database.revive()
      if (url !== env().DATABASE_URL) {
        moved(url)
        note('The database is at another port now.')
        await Promise.all([server.restart(), worker.restart()])
      }
    }
    const again = () => setTimeout(() => void watch().catch(report).finally(again), 1000).unref()
    again()
  }
})
