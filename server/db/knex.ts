import knex, { type Knex } from 'knex'
import pg from 'pg'

// bigint columns (sequence numbers, byte counts) stay far below 2^53: read them as numbers.
pg.types.setTypeParser(20, (text) => Number(text))

export const migrationSource = {
  directory: new URL('../../migrations', import.meta.url).pathname,
  loadExtensions: ['.ts']
}

export const connect = (databaseUrl: string, pool = { min: 0, max: 12 }): Knex =>
  knex({
    client: 'pg',
    connection: { connectionString: databaseUrl, application_name: 'plumbline', connectionTimeoutMillis: 10_000 },
    pool,
    acquireConnectionTimeout: 15_000,
    migrations: migrationSource
  })

/** A transaction or the plain connection: repositories take either. */
export type Db = Knex
