import { readClock } from '@/db/queries/clock'
import { listOrganisationNames, listStudiesFor, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { permittedRole } from '@/lib/domain/permissions'

export interface StudyListEntry {
  readonly study: StudyRecord
  /** In what capacity the person reads it, and so where the entry leads. */
  readonly as: 'coordinator' | 'laboratory' | 'committee'
}

/** Every study a person has to do with, once for each capacity. */
export async function listStudies(context: Context): Promise<{
  now: Date
  entries: StudyListEntry[]
  mayCreateIn: { organisationId: string; name: string }[]
}> {
  const { actor } = context
  const mayCreate = actor.organisations.filter((target) => permittedRole(actor, 'study.create', target))
  const [now, studies, mayCreateIn] = await Promise.all([
    readClock(context.db),
    listStudiesFor(context.db, actor),
    listOrganisationNames(
      context.db,
      mayCreate.map(({ organisationId }) => organisationId),
    ),
  ])
  const entries = studies.flatMap((study): StudyListEntry[] => [
    ...(permittedRole(actor, 'study.read', study) ? [{ study, as: 'coordinator' as const }] : []),
    ...(actor.laboratories.some(({ studyId }) => studyId === study.studyId)
      ? [{ study, as: 'laboratory' as const }]
      : []),
    ...(actor.committees.some(({ studyId }) => studyId === study.studyId)
      ? [{ study, as: 'committee' as const }]
      : []),
  ])
  return { now, entries, mayCreateIn }
}
