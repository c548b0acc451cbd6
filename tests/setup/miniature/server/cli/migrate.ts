// Two at once fail, as a half-done migration would.
import { mkdirSync, rmdirSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'

const mark = `${process.env['STORAGE_DIR']}/migrating`
mkdirSync(mark)
await sleep(200)
rmdirSync(mark)
