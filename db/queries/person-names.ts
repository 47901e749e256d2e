import type { Kysely } from 'kysely'
import type { DB } from '@/db/tables'

export async function findPersonNames(
  db: Kysely<DB>,
  personIds: readonly string[],
): Promise<Map<string, string>> {
  if (personIds.length === 0) return new Map()
  const rows = await db
    .selectFrom('vault.User')
    .where('id', 'in', [...new Set(personIds)])
    .select(['id', 'name', 'email'])
    .execute()
  return new Map(rows.map(({ id, name, email }) => [id, name ?? email]))
}
