import { findPublished, listPublished, type PublishedRow } from '@/db/anonymous/publications'
import { NotFound } from '@/lib/domain/errors'
import type { PublicationSnapshot } from '@/lib/domain/publication-snapshot'
import type { ReaderContext } from '@/lib/reader-context'

export interface Publication {
  readonly slug: string
  /** "2027-05-02" */
  readonly publishedOn: string
  readonly digest: string
  readonly snapshot: PublicationSnapshot
}

/** Everything published, the newest first. */
export async function listPublications({ reader }: ReaderContext): Promise<Publication[]> {
  return (await listPublished(reader)).map(toPublication)
}

/** One published study, as it was frozen. @throws {NotFound} */
export async function readPublication(
  { reader }: ReaderContext,
  { slug }: { slug: string },
): Promise<Publication> {
  const row = await findPublished(reader, slug)
  if (!row) throw new NotFound('publication')
  return toPublication(row)
}

function toPublication(row: PublishedRow): Publication {
  return { ...row, snapshot: JSON.parse(row.snapshot) as PublicationSnapshot }
}
