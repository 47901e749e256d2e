import type { Kysely } from 'kysely'
import type { DB } from '@/db/tables'

export interface MailState {
  readonly ids: Readonly<Record<string, string>>
  readonly queuedAt: Date
  readonly outcome: 'waiting' | 'sent' | 'refused' | 'deferred' | 'dropped'
  readonly detail: string | null
}

/** What became of a study's mails of one kind, the earliest first. */
export async function listMailStates(
  db: Kysely<DB>,
  { studyId, kind }: { studyId: string; kind: string },
): Promise<MailState[]> {
  const rows = await db
    .selectFrom('vault.mail as mail')
    .leftJoinLateral(
      (from) =>
        from
          .selectFrom('vault.mail_attempt as attempt')
          .select(['attempt.outcome', 'attempt.detail'])
          .whereRef('attempt.mail_id', '=', 'mail.mail_id')
          .orderBy('attempt.number', 'desc')
          .limit(1)
          .as('last'),
      (join) => join.onTrue(),
    )
    .where('mail.study_id', '=', studyId)
    .where('mail.kind', '=', kind)
    .orderBy('mail.queued_at')
    .select(['mail.subject_ids', 'mail.queued_at', 'last.outcome', 'last.detail'])
    .execute()
  return rows.map((row) => ({
    ids: row.subject_ids as Record<string, string>,
    queuedAt: row.queued_at,
    outcome: (row.outcome ?? 'waiting') as MailState['outcome'],
    detail: row.detail,
  }))
}
