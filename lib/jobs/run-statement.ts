import { CompiledQuery, type Kysely } from 'kysely'
import type { DB } from '@/db/tables'

/** Lets a library that writes its own SQL use our connections and transactions. */
export async function runStatement(
  db: Kysely<DB>,
  text: string,
  values: readonly unknown[] = [],
): Promise<{ rows: Record<string, unknown>[]; rowCount: number }> {
  const { rows, numAffectedRows } = await db.executeQuery<Record<string, unknown>>(
    CompiledQuery.raw(text, [...values]),
  )
  return { rows, rowCount: Number(numAffectedRows ?? rows.length) }
}
