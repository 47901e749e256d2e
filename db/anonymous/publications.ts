import type { Kysely } from 'kysely'
import type { DB } from '@/db/tables'

export interface PublishedRow {
  readonly slug: string
  readonly publishedOn: string
  readonly snapshot: string
  readonly digest: string
}

function selectPublished(reader: Kysely<DB>) {
  return reader
    .selectFrom('publication')
    .innerJoin('publication_proposal as proposal', (join) =>
      join
        .onRef('proposal.study_id', '=', 'publication.study_id')
        .onRef('proposal.proposal_id', '=', 'publication.proposal_id'),
    )
    .select([
      'publication.slug',
      'publication.published_on as publishedOn',
      'proposal.snapshot',
      'proposal.digest',
    ])
}

/** Everything published, the newest first. */
export async function listPublished(reader: Kysely<DB>): Promise<PublishedRow[]> {
  const rows = await selectPublished(reader)
    .orderBy('publication.published_on', 'desc')
    .orderBy('publication.slug')
    .execute()
  return rows.map((row) => ({ ...row, publishedOn: String(row.publishedOn) }))
}

export async function findPublished(reader: Kysely<DB>, slug: string): Promise<PublishedRow | undefined> {
  const row = await selectPublished(reader).where('publication.slug', '=', slug).executeTakeFirst()
  return row && { ...row, publishedOn: String(row.publishedOn) }
}
