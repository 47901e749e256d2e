import type { Kysely } from 'kysely'
import type { DB } from '@/db/tables'
import type { StudyState } from '@/lib/domain/study-states'

/** A study as one who knows no names may see it: nothing here asks for more than the reader login may read. */
export interface AnonymousStudy {
  readonly studyId: string
  readonly organisationId: string
  readonly organisation: string
  readonly shortName: string
  readonly title: string
  readonly method: string
  readonly purpose: string
  readonly limitFactor: string
  readonly state: StudyState
}

export async function findAnonymousStudy(
  reader: Kysely<DB>,
  studyId: string,
): Promise<AnonymousStudy | undefined> {
  const row = await reader
    .selectFrom('study')
    .innerJoin('organisation', 'organisation.organisation_id', 'study.organisation_id')
    .innerJoin('study_state as state', 'state.study_id', 'study.study_id')
    .where('study.study_id', '=', studyId)
    .orderBy('state.number', 'desc')
    .limit(1)
    .select([
      'study.study_id as studyId',
      'study.organisation_id as organisationId',
      'organisation.name as organisation',
      'study.short_name as shortName',
      'study.title',
      'study.method',
      'study.purpose',
      'study.limit_factor as limitFactor',
      'state.state',
    ])
    .executeTakeFirst()
  return row && { ...row, state: row.state as StudyState }
}

export async function listAnonymousMeasurands(reader: Kysely<DB>, studyId: string) {
  return reader
    .selectFrom('measurand')
    .where('study_id', '=', studyId)
    .orderBy('position')
    .select(['measurand_id as measurandId', 'name', 'unit', 'decimals', 'has_true_zero as hasTrueZero'])
    .execute()
}

export async function listAnonymousMaterials(reader: Kysely<DB>, studyId: string) {
  return reader
    .selectFrom('material')
    .where('study_id', '=', studyId)
    .orderBy('position')
    .select(['material_id as materialId', 'name', 'description'])
    .execute()
}

export async function listAnonymousLevels(reader: Kysely<DB>, studyId: string) {
  return reader
    .selectFrom('nesting_level')
    .where('study_id', '=', studyId)
    .orderBy('position')
    .select(['name', 'count'])
    .execute()
}

export interface AnonymousAnalysis {
  readonly analysisId: string
  readonly number: number
  readonly engineVersion: string
  readonly digest: string
  readonly documents: readonly { measurandId: string; csv: string; inputDigest: string; document: string }[]
}

export async function findAnonymousAnalysis(
  reader: Kysely<DB>,
  studyId: string,
): Promise<AnonymousAnalysis | undefined> {
  const analysis = await reader
    .selectFrom('analysis')
    .where('study_id', '=', studyId)
    .orderBy('number', 'desc')
    .limit(1)
    .select(['analysis_id as analysisId', 'number', 'engine_version as engineVersion', 'digest'])
    .executeTakeFirst()
  if (!analysis) return undefined
  const documents = await reader
    .selectFrom('analysis_document')
    .where('study_id', '=', studyId)
    .where('analysis_id', '=', analysis.analysisId)
    .select(['measurand_id as measurandId', 'input_csv as csv', 'input_digest as inputDigest', 'document'])
    .execute()
  return { ...analysis, documents }
}

export interface AnonymousExclusion {
  readonly code: string
  readonly measurandId: string
  readonly materialId: string
  readonly material: string
  readonly reason: string
}

/** The cells set aside now, by code, in the order of the codes. */
export async function listAnonymousExclusions(
  reader: Kysely<DB>,
  studyId: string,
): Promise<AnonymousExclusion[]> {
  return reader
    .selectFrom('exclusion')
    .innerJoin('participant', (join) =>
      join
        .onRef('participant.study_id', '=', 'exclusion.study_id')
        .onRef('participant.participant_id', '=', 'exclusion.participant_id'),
    )
    .innerJoin('material', (join) =>
      join
        .onRef('material.study_id', '=', 'exclusion.study_id')
        .onRef('material.material_id', '=', 'exclusion.material_id'),
    )
    .leftJoin('exclusion_lifted as lifted', (join) =>
      join
        .onRef('lifted.study_id', '=', 'exclusion.study_id')
        .onRef('lifted.exclusion_id', '=', 'exclusion.exclusion_id'),
    )
    .where('exclusion.study_id', '=', studyId)
    .where('lifted.exclusion_id', 'is', null)
    .orderBy('participant.code')
    .orderBy('material.position')
    .select([
      'participant.code',
      'exclusion.measurand_id as measurandId',
      'exclusion.material_id as materialId',
      'material.name as material',
      'exclusion.reason',
    ])
    .execute()
}
