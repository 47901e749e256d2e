import type { Transaction } from 'kysely'
import { insertAuditEntry } from '@/db/queries/audit'
import type { DB } from '@/db/tables'
import type { Actor } from '@/lib/domain/actor'
import type { AuditFact } from '@/lib/domain/audit-entry'

/** Writes who did what into the study's chain, in the transaction of the change. */
export async function recordAudit(
  trx: Transaction<DB>,
  { actor, role, studyId, fact }: { actor: Actor | null; role: string; studyId: string; fact: AuditFact },
): Promise<void> {
  await insertAuditEntry(trx, { studyId, actorId: actor?.personId ?? null, actorRole: role, fact })
}
