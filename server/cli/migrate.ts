// Brings the database to the latest migration.
import { configOrExit } from '@server/config'
import { connect } from '@server/db/knex'

const knex = connect(configOrExit().databaseUrl)
try {
  await knex.migrate.latest()
} catch (error) {
  process.stderr.write(
    `The database could not be brought up to date: ${error instanceof Error ? error.message : String(error)}\n`
  )
  process.exitCode = 1
} finally {
  await knex.destroy()
}
