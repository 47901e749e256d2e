import { sql, Migrator, type Kysely } from 'kysely'
import { createDatabase } from '@/db/connection'
import type { DB } from '@/db/tables'
import { migrations } from '@/migrations'
import { installQueues } from './install-queues'

/** Brings a database to the latest migration, as its owner. Returns the names of those that ran. */
export async function migrateDatabase(ownerUrl: string): Promise<string[]> {
  const db = createDatabase(ownerUrl, { applicationName: 'evenlot-migrate', max: 2 })
  try {
    await requireRoles(db)
    const { error, results = [] } = await migrator(db).migrateToLatest()
    if (error) throw error
    await installQueues(db)
    await showRecordToApp(db)
    return results.filter(({ status }) => status === 'Success').map(({ migrationName }) => migrationName)
  } finally {
    await db.destroy()
  }
}

export function migrator(db: Kysely<DB>): Migrator {
  return new Migrator({
    db,
    provider: { getMigrations: async () => migrations },
    // In a schema of its own, so that grants on the product's tables never reach the migrator's.
    migrationTableSchema: 'migrations',
  })
}

/** The web server says that it is ready only when the database is at the migration it was built for. */
async function showRecordToApp(db: Kysely<DB>): Promise<void> {
  await sql`grant usage on schema migrations to app`.execute(db)
  await sql`grant select on migrations.kysely_migration to app`.execute(db)
}

/** Migrations grant to these two logins; without them the failure would name a statement instead of the remedy. */
async function requireRoles(db: Kysely<DB>): Promise<void> {
  const { rows } = await sql<{ rolname: string }>`
    select rolname from pg_roles where rolname in ('app', 'reader')
  `.execute(db)
  const missing = ['app', 'reader'].filter((role) => !rows.some(({ rolname }) => rolname === role))
  if (missing.length > 0) {
    throw new Error(
      `The database server has no login ${missing.join(' and ')}. ` +
        `An administrator must create it: ${missing.map((role) => `create role "${role}" login`).join('; ')}.`,
    )
  }
}
