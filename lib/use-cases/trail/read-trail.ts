import { findChainHead, listAuditEntries, listCodesByParticipant } from '@/db/queries/audit'
import { findPersonNames } from '@/db/queries/person-names'
import { findStudyFor, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { findBreak, type AuditEntry } from '@/lib/domain/audit-entry'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'

export interface TrailView {
  readonly study: StudyRecord
  readonly entries: readonly (AuditEntry & { actor: string })[]
  readonly verdict: { sequence: number; reason: string } | null
  readonly head: string | null
  /** Names of people and codes of laboratories that entries speak of, by id. */
  readonly subjects: ReadonlyMap<string, string>
}

/**
 * A study's audit trail and whether its chain holds. A contact of a laboratory appears as "a laboratory": the
 * trail is no key to the codes.
 */
export async function readTrail(context: Context, { studyId }: { studyId: string }): Promise<TrailView> {
  const study = await findStudyFor(context.db, context.actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(context.actor, 'trail.read', study)
  const [entries, head] = await Promise.all([
    listAuditEntries(context.db, studyId),
    findChainHead(context.db, studyId),
  ])
  const actors = entries
    .filter((entry) => entry.actorRole !== 'contact')
    .flatMap((entry) => entry.actorId ?? [])
  const members = entries
    .filter(({ action }) => action.startsWith('committee.'))
    .flatMap(({ body }) => personOf(body) ?? [])
  const [names, codes] = await Promise.all([
    findPersonNames(context.db, [...actors, ...members]),
    listCodesByParticipant(context.db, studyId),
  ])
  return {
    study,
    entries: entries.map((entry) => ({ ...entry, actor: actorWords(entry, names) })),
    verdict: findBreak(entries, head),
    head: head.sequence > 0 ? head.hash : null,
    subjects: new Map([...names, ...codes]),
  }
}

function actorWords(entry: AuditEntry, names: ReadonlyMap<string, string>): string {
  if (entry.actorRole === 'contact') return 'a laboratory'
  return (entry.actorId && names.get(entry.actorId)) ?? entry.actorRole
}

function personOf(body: string): string | undefined {
  const { personId } = JSON.parse(body) as { personId?: unknown }
  return typeof personId === 'string' ? personId : undefined
}
