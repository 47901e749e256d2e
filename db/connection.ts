import { Kysely, PostgresDialect } from 'kysely'
import pg from 'pg'
import type { DB } from './tables'

interface Options {
  /** Shown by PostgreSQL beside each connection, so that an operator sees whose it is. */
  applicationName: string
  max?: number
}

/** A pool of connections behind Kysely. The caller destroys it. */
export function createDatabase(url: string, { applicationName, max = 10 }: Options): Kysely<DB> {
  const pool = new pg.Pool({
    connectionString: url,
    application_name: applicationName,
    max,
    types: ourTypes(),
    connectionTimeoutMillis: 10_000,
  })
  // An idle connection that the server closes would otherwise end the process; the pool replaces it.
  pool.on('error', () => undefined)
  return new Kysely<DB>({ dialect: new PostgresDialect({ pool }) })
}

/** This pool's own readings, so that nothing else that uses the driver in this process is changed by us. */
function ourTypes(): pg.CustomTypesConfig {
  const overrides = new pg.TypeOverrides()
  overrides.setTypeParser(pg.types.builtins.INT8, parseInt8)
  // A calendar date has no time of day; as a Date it would shift with the machine's zone.
  overrides.setTypeParser(pg.types.builtins.DATE, (text) => text)
  return overrides
}

/** Counts and sums arrive as int8; as strings they would be joined where they should be added. */
function parseInt8(text: string): number {
  const value = Number(text)
  if (!Number.isSafeInteger(value))
    throw new RangeError(`The database sent ${text}, too large to be counted with.`)
  return value
}
