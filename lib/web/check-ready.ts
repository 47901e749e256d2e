import { sql, type Kysely } from 'kysely'
import type { DB } from '@/db/tables'
import { logDefect } from '@/lib/log'
import { migrations } from '@/migrations'

/** The database answers, and holds the migrations this program was built for. */
export async function checkReady(db: Kysely<DB>): Promise<boolean> {
  try {
    const { rows } = await sql<{ name: string }>`select name from migrations.kysely_migration`.execute(db)
    const done = new Set(rows.map(({ name }) => name))
    return Object.keys(migrations).every((name) => done.has(name))
  } catch (error) {
    logDefect(error, { place: 'ready' })
    return false
  }
}
