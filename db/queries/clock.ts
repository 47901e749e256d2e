import { sql, type Kysely } from 'kysely'
import type { DB } from '@/db/tables'

/** The database's time, by which everything with a deadline is decided. */
export async function readClock(db: Kysely<DB>): Promise<Date> {
  const { rows } = await sql<{ now: Date }>`select clock_now() as now`.execute(db)
  if (!rows[0]) throw new Error('the clock gave no time')
  return rows[0].now
}
