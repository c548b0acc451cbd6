// For Knex's own command line: node --import tsx node_modules/knex/bin/cli.js --knexfile server/db/knexfile.ts
import { migrationSource } from '@server/db/knex'
import { configOrExit } from '@server/config'

export default { client: 'pg', connection: configOrExit().databaseUrl, migrations: migrationSource }
