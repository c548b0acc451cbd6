// Opens the database of a folder, says its address, closes it when told to.
import { openPostgres } from '../../../server/setup/postgres.mjs'

const [folder = '', durability = ''] = process.argv.slice(2)
const database = await openPostgres({ folder, isDurable: durability === 'durable' })
process.stdout.write(`${database.url}\n`)
process.stdin.once('data', () => void database.close().then(() => process.exit(0)))
