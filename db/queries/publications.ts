import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface ProposalRecord {
  readonly proposalId: string
  readonly analysisId: string
  readonly digest: string
  readonly snapshot: string
  readonly proposedAt: Date
  readonly proposedBy: string
  readonly proposer: string
}

/** The proposal that stands: neither withdrawn nor confirmed. */
export async function findOpenProposal(db: Kysely<DB>, studyId: string): Promise<ProposalRecord | undefined> {
  const row = await db
    .selectFrom('publication_proposal as proposal')
    .innerJoin('vault.User as person', 'person.id', 'proposal.proposed_by')
    .leftJoin('publication_proposal_withdrawn as withdrawn', (join) =>
      join
        .onRef('withdrawn.study_id', '=', 'proposal.study_id')
        .onRef('withdrawn.proposal_id', '=', 'proposal.proposal_id'),
    )
    .leftJoin('publication', (join) =>
      join
        .onRef('publication.study_id', '=', 'proposal.study_id')
        .onRef('publication.proposal_id', '=', 'proposal.proposal_id'),
    )
    .where('proposal.study_id', '=', studyId)
    .where('withdrawn.proposal_id', 'is', null)
    .where('publication.proposal_id', 'is', null)
    .select([
      'proposal.proposal_id as proposalId',
      'proposal.analysis_id as analysisId',
      'proposal.digest',
      'proposal.snapshot',
      'proposal.proposed_at as proposedAt',
      'proposal.proposed_by as proposedBy',
      'person.name as proposer',
    ])
    .executeTakeFirst()
  return row && { ...row, proposer: row.proposer ?? 'a coordinator' }
}

export async function insertProposal(
  trx: Transaction<DB>,
  row: { studyId: string; analysisId: string; snapshot: string; digest: string; personId: string },
): Promise<string> {
  const { proposal_id } = await trx
    .insertInto('publication_proposal')
    .values({
      study_id: row.studyId,
      analysis_id: row.analysisId,
      snapshot: row.snapshot,
      digest: row.digest,
      proposed_by: row.personId,
    })
    .returning('proposal_id')
    .executeTakeFirstOrThrow()
  return proposal_id
}

export async function insertProposalWithdrawn(
  trx: Transaction<DB>,
  row: { studyId: string; proposalId: string; reason: string; personId: string },
): Promise<void> {
  await trx
    .insertInto('publication_proposal_withdrawn')
    .values({
      study_id: row.studyId,
      proposal_id: row.proposalId,
      reason: row.reason,
      withdrawn_by: row.personId,
    })
    .execute()
}

/** Publishes under the first free address made of the slug. */
export async function insertPublication(
  trx: Transaction<DB>,
  row: { studyId: string; proposalId: string; slug: string; proposedBy: string; personId: string },
): Promise<string> {
  const taken = await trx
    .selectFrom('publication')
    .select('slug')
    .where('slug', 'like', `${row.slug}%`)
    .execute()
  const slugs = new Set(taken.map(({ slug }) => slug))
  let slug = row.slug
  for (let number = 2; slugs.has(slug); number += 1) slug = `${row.slug}-${number}`
  await trx
    .insertInto('publication')
    .values({
      study_id: row.studyId,
      proposal_id: row.proposalId,
      slug,
      published_on: sql`(clock_now() at time zone 'UTC')::date`,
      proposed_by: row.proposedBy,
      confirmed_by: row.personId,
    })
    .execute()
  return slug
}

export async function findPublication(db: Kysely<DB>, studyId: string) {
  return db
    .selectFrom('publication')
    .innerJoin('vault.User as proposer', 'proposer.id', 'publication.proposed_by')
    .innerJoin('vault.User as confirmer', 'confirmer.id', 'publication.confirmed_by')
    .where('publication.study_id', '=', studyId)
    .select([
      'publication.slug',
      'publication.confirmed_at as confirmedAt',
      'proposer.name as proposer',
      'confirmer.name as confirmer',
    ])
    .executeTakeFirst()
}
