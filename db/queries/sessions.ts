import { sql, type Kysely } from 'kysely'
import type { DB } from '@/db/tables'

interface Session {
  readonly hash: string
  readonly endsAt: Date
}

export async function insertSession(
  db: Kysely<DB>,
  { hash, endsAt, personId, idleHours }: Session & { personId: string; idleHours: number },
): Promise<void> {
  const expires = idleEnd(endsAt, idleHours)
  await db.insertInto('vault.Session').values({ sessionToken: hash, userId: personId, expires }).execute()
}

/** The person behind a session that has neither lain idle too long nor reached its last moment. */
export async function findSession(
  db: Kysely<DB>,
  { hash, endsAt }: Session,
): Promise<{ personId: string; isDueForTouch: boolean } | undefined> {
  return (
    db
      .selectFrom('vault.Session')
      // Written again at most every few minutes, so that reading a page seldom means writing a row.
      .select([
        'userId as personId',
        sql<boolean>`expires < clock_now() + interval '11 hours 55 minutes'`.as('isDueForTouch'),
      ])
      .where('sessionToken', '=', hash)
      .where('expires', '>', sql<Date>`clock_now()`)
      .where(sql<boolean>`${endsAt}::timestamptz > clock_now()`)
      .executeTakeFirst()
  )
}

export async function touchSession(
  db: Kysely<DB>,
  { hash, endsAt, idleHours }: Session & { idleHours: number },
): Promise<void> {
  await db
    .updateTable('vault.Session')
    .set({ expires: idleEnd(endsAt, idleHours) })
    .where('sessionToken', '=', hash)
    .execute()
}

export async function deleteSession(db: Kysely<DB>, hash: string): Promise<void> {
  await db
    .deleteFrom('vault.Session')
    .where((where) =>
      where.or([where('sessionToken', '=', hash), where('expires', '<', sql<Date>`clock_now()`)]),
    )
    .execute()
}

export async function findClock(db: Kysely<DB>): Promise<Date> {
  const { rows } = await sql<{ now: Date }>`select clock_now() as now`.execute(db)
  const now = rows[0]?.now
  if (!now) throw new Error('the database gave no time')
  return now
}

function idleEnd(endsAt: Date, idleHours: number) {
  return sql<Date>`least(clock_now() + make_interval(hours => ${idleHours}), ${endsAt}::timestamptz)`
}
