import { appendFileSync } from 'node:fs'

appendFileSync(`${process.env['STORAGE_DIR']}/seeded`, 'once more\n')
