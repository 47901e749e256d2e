import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import {
  canonicalJson,
  chainStart,
  hashEntry,
  type AuditEntry,
  type AuditFact,
} from '@/lib/domain/audit-entry'

/** Appends to a study's chain in the caller's transaction; the chain's own row serialises appends. */
export async function insertAuditEntry(
  trx: Transaction<DB>,
  {
    studyId,
    actorId,
    actorRole,
    fact,
  }: { studyId: string; actorId: string | null; actorRole: string; fact: AuditFact },
): Promise<void> {
  await trx
    .insertInto('audit.chain')
    .values({ study_id: studyId, sequence: 0, hash: chainStart })
    .onConflict((conflict) => conflict.column('study_id').doNothing())
    .execute()
  const head = await trx
    .selectFrom('audit.chain')
    .select(['sequence', 'hash', sql<Date>`clock_now()`.as('now')])
    .where('study_id', '=', studyId)
    .forUpdate()
    .executeTakeFirstOrThrow()
  const { action, version, ...details } = fact
  const entry = {
    studyId,
    sequence: head.sequence + 1,
    at: head.now.toISOString(),
    actorId,
    actorRole,
    action,
    version,
    body: canonicalJson(details),
    previousHash: head.hash,
  }
  const hash = hashEntry(entry)
  await trx
    .insertInto('audit.entry')
    .values({
      study_id: studyId,
      sequence: entry.sequence,
      at: entry.at,
      actor_id: actorId,
      actor_role: actorRole,
      action,
      version,
      body: entry.body,
      previous_hash: head.hash,
      hash,
    })
    .execute()
  await trx
    .updateTable('audit.chain')
    .set({ sequence: entry.sequence, hash })
    .where('study_id', '=', studyId)
    .execute()
}

export async function listAuditEntries(db: Kysely<DB>, studyId: string): Promise<AuditEntry[]> {
  const rows = await db
    .selectFrom('audit.entry')
    .select([
      'study_id',
      'sequence',
      'at',
      'actor_id',
      'actor_role',
      'action',
      'version',
      'body',
      'previous_hash',
      'hash',
    ])
    .where('study_id', '=', studyId)
    .orderBy('sequence')
    .execute()
  return rows.map((row) => ({
    studyId: row.study_id,
    sequence: row.sequence,
    at: new Date(row.at).toISOString(),
    actorId: row.actor_id,
    actorRole: row.actor_role,
    action: row.action,
    version: row.version,
    body: row.body,
    previousHash: row.previous_hash,
    hash: row.hash,
  }))
}

/** Where a chain says it ends. Without its row it says that it never began, which entries then belie. */
export async function findChainHead(
  db: Kysely<DB>,
  studyId: string,
): Promise<{ sequence: number; hash: string }> {
  const head = await db
    .selectFrom('audit.chain')
    .select(['sequence', 'hash'])
    .where('study_id', '=', studyId)
    .executeTakeFirst()
  return head ?? { sequence: 0, hash: chainStart }
}

/** Every chain of which a head or an entry is left. */
export async function listChains(db: Kysely<DB>): Promise<string[]> {
  const rows = await db
    .selectFrom('audit.chain')
    .select('study_id')
    .union(db.selectFrom('audit.entry').select('study_id'))
    .orderBy('study_id')
    .execute()
  return rows.map((row) => row.study_id)
}

/** The codes of a study's laboratories, by participant. */
export async function listCodesByParticipant(db: Kysely<DB>, studyId: string): Promise<Map<string, string>> {
  const rows = await db
    .selectFrom('participant')
    .select(['participant_id', 'code'])
    .where('study_id', '=', studyId)
    .execute()
  return new Map(rows.map((row) => [row.participant_id, row.code]))
}
