// Writes the demo group into a database that never had it.
import { seedOnce } from '../../seeds/seed'
import { configOrExit } from '@server/config'
import { connect } from '@server/db/knex'
import { createLocalStorage } from '@server/media/storage'

const config = configOrExit()
const db = connect(config.databaseUrl)
try {
  if (await seedOnce(db, createLocalStorage(config.storageDir), new Date()))
    process.stdout.write('The demo group is in.\n')
} finally {
  await db.destroy()
}
