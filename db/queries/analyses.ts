import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import type { CodedResult } from '@/lib/domain/coded-results'

/**
 * The results of each laboratory's latest return for one measurand, with the cells set aside marked, by code, material and
 * place.
 *
 * Returns, results and cells set aside are read by themselves: joined by the study, as the planner joins them before it
 * has counted the rows of a large one, they took half a minute with 500 laboratories.
 */
export async function listCodedResults(
  db: Kysely<DB>,
  place: { studyId: string; measurandId: string },
): Promise<CodedResult[]> {
  const returns = await listLatestReturns(db, place.studyId)
  const excluded = await listCellsSetAside(db, place)
  const results = await listResults(db, place)
  const byReturn = new Map<string, (typeof results)[number][]>()
  for (const result of results) {
    const own = byReturn.get(result.returnId)
    if (own === undefined) byReturn.set(result.returnId, [result])
    else own.push(result)
  }
  return returns.flatMap(({ returnId, participantId, code }) =>
    (byReturn.get(returnId) ?? []).map(({ material, materialId, groups, value, censored }) => ({
      code,
      material,
      groups,
      value,
      censored: censored as CodedResult['censored'],
      excluded: excluded.has(cellKey({ participantId, materialId })),
    })),
  )
}

/** One a laboratory that has returned, in the order of the codes. */
async function listLatestReturns(db: Kysely<DB>, studyId: string) {
  const rows = await db
    .selectFrom('result_return as each')
    .innerJoin('participant', (join) =>
      join
        .onRef('participant.study_id', '=', 'each.study_id')
        .onRef('participant.participant_id', '=', 'each.participant_id'),
    )
    .where('each.study_id', '=', studyId)
    .select(['each.return_id as returnId', 'each.participant_id as participantId', 'participant.code'])
    .orderBy('participant.code')
    .orderBy('each.number', 'desc')
    .execute()
  return rows.filter(({ participantId }, index) => participantId !== rows[index - 1]?.participantId)
}

/** By material and place; of every return, whether or not a later one took its stead. */
async function listResults(
  db: Kysely<DB>,
  { studyId, measurandId }: { studyId: string; measurandId: string },
) {
  return db
    .selectFrom('test_result as result')
    .innerJoin('material', (join) =>
      join
        .onRef('material.study_id', '=', 'result.study_id')
        .onRef('material.material_id', '=', 'result.material_id'),
    )
    .where('result.study_id', '=', studyId)
    .where('result.measurand_id', '=', measurandId)
    .select([
      'result.return_id as returnId',
      'result.material_id as materialId',
      'material.name as material',
      'result.place as groups',
      sql<string>`result.value::text`.as('value'),
      'result.censored',
    ])
    .orderBy('material.position')
    .orderBy('result.place')
    .execute()
}

async function listCellsSetAside(
  db: Kysely<DB>,
  { studyId, measurandId }: { studyId: string; measurandId: string },
): Promise<ReadonlySet<string>> {
  const rows = await db
    .selectFrom('exclusion')
    .leftJoin('exclusion_lifted as lifted', (join) =>
      join
        .onRef('lifted.study_id', '=', 'exclusion.study_id')
        .onRef('lifted.exclusion_id', '=', 'exclusion.exclusion_id'),
    )
    .where('exclusion.study_id', '=', studyId)
    .where('exclusion.measurand_id', '=', measurandId)
    .where('lifted.exclusion_id', 'is', null)
    .select(['exclusion.participant_id as participantId', 'exclusion.material_id as materialId'])
    .execute()
  return new Set(rows.map(cellKey))
}

function cellKey({ participantId, materialId }: { participantId: string; materialId: string }): string {
  return `${participantId} ${materialId}`
}

export async function insertAnalysisRequest(
  trx: Transaction<DB>,
  { studyId, personId }: { studyId: string; personId: string },
): Promise<number> {
  const { number } = await trx
    .insertInto('analysis_request')
    .values((values) => ({
      study_id: studyId,
      number: values
        .selectFrom('analysis_request')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', studyId),
      requested_by: personId,
    }))
    .returning('number')
    .executeTakeFirstOrThrow()
  return number
}

/** The latest request and whether its analysis is there. */
export async function findAnalysisProgress(
  db: Kysely<DB>,
  studyId: string,
): Promise<{ number: number; requestedAt: Date; done: boolean } | undefined> {
  const row = await db
    .selectFrom('analysis_request as request')
    .leftJoin('analysis', (join) =>
      join
        .onRef('analysis.study_id', '=', 'request.study_id')
        .onRef('analysis.number', '=', 'request.number'),
    )
    .where('request.study_id', '=', studyId)
    .orderBy('request.number', 'desc')
    .limit(1)
    .select(['request.number', 'request.requested_at as requestedAt', 'analysis.analysis_id as analysisId'])
    .executeTakeFirst()
  return row && { number: row.number, requestedAt: row.requestedAt, done: row.analysisId !== null }
}

export async function findAnalysisRequest(
  db: Kysely<DB>,
  { studyId, number }: { studyId: string; number: number },
) {
  return db
    .selectFrom('analysis_request as request')
    .leftJoin('analysis', (join) =>
      join
        .onRef('analysis.study_id', '=', 'request.study_id')
        .onRef('analysis.number', '=', 'request.number'),
    )
    .innerJoin('study', 'study.study_id', 'request.study_id')
    .where('request.study_id', '=', studyId)
    .where('request.number', '=', number)
    .select([
      'request.requested_by as requestedBy',
      'analysis.analysis_id as analysisId',
      'study.limit_factor as limitFactor',
    ])
    .executeTakeFirst()
}

export async function insertAnalysis(
  trx: Transaction<DB>,
  row: {
    studyId: string
    number: number
    engineVersion: string
    settings: string
    digest: string
    documents: readonly { measurandId: string; csv: string; inputDigest: string; document: string }[]
  },
): Promise<string> {
  const { analysis_id: analysisId } = await trx
    .insertInto('analysis')
    .values({
      study_id: row.studyId,
      number: row.number,
      engine_version: row.engineVersion,
      settings: row.settings,
      digest: row.digest,
    })
    .returning('analysis_id')
    .executeTakeFirstOrThrow()
  await trx
    .insertInto('analysis_document')
    .values(
      row.documents.map((each) => ({
        study_id: row.studyId,
        analysis_id: analysisId,
        measurand_id: each.measurandId,
        input_csv: each.csv,
        input_digest: each.inputDigest,
        document: each.document,
      })),
    )
    .execute()
  return analysisId
}

/** The latest analysis with the digests of what went into it. */
export async function findLatestAnalysis(db: Kysely<DB>, studyId: string) {
  const analysis = await db
    .selectFrom('analysis')
    .where('study_id', '=', studyId)
    .orderBy('number', 'desc')
    .limit(1)
    .select(['analysis_id as analysisId', 'number', 'digest', 'engine_version as engineVersion'])
    .executeTakeFirst()
  if (!analysis) return undefined
  const inputs = await db
    .selectFrom('analysis_document')
    .where('study_id', '=', studyId)
    .where('analysis_id', '=', analysis.analysisId)
    .select(['measurand_id as measurandId', 'input_digest as inputDigest'])
    .execute()
  return { ...analysis, inputs: new Map(inputs.map((each) => [each.measurandId, each.inputDigest])) }
}

export async function findParticipantByCode(
  db: Kysely<DB>,
  { studyId, code }: { studyId: string; code: string },
): Promise<string | undefined> {
  const row = await db
    .selectFrom('participant')
    .select('participant_id')
    .where('study_id', '=', studyId)
    .where('code', '=', code)
    .executeTakeFirst()
  return row?.participant_id
}

export async function insertExclusion(
  trx: Transaction<DB>,
  row: {
    studyId: string
    participantId: string
    measurandId: string
    materialId: string
    reason: string
    personId: string
  },
): Promise<string> {
  const { exclusion_id } = await trx
    .insertInto('exclusion')
    .values({
      study_id: row.studyId,
      participant_id: row.participantId,
      measurand_id: row.measurandId,
      material_id: row.materialId,
      reason: row.reason,
      decided_by: row.personId,
    })
    .returning('exclusion_id')
    .executeTakeFirstOrThrow()
  return exclusion_id
}

export async function findStandingExclusion(
  db: Kysely<DB>,
  cell: { studyId: string; participantId: string; measurandId: string; materialId: string },
): Promise<string | undefined> {
  const row = await db
    .selectFrom('exclusion')
    .leftJoin('exclusion_lifted as lifted', (join) =>
      join
        .onRef('lifted.study_id', '=', 'exclusion.study_id')
        .onRef('lifted.exclusion_id', '=', 'exclusion.exclusion_id'),
    )
    .where('exclusion.study_id', '=', cell.studyId)
    .where('exclusion.participant_id', '=', cell.participantId)
    .where('exclusion.measurand_id', '=', cell.measurandId)
    .where('exclusion.material_id', '=', cell.materialId)
    .where('lifted.exclusion_id', 'is', null)
    .select('exclusion.exclusion_id')
    .executeTakeFirst()
  return row?.exclusion_id
}

export async function insertExclusionLifted(
  trx: Transaction<DB>,
  row: { studyId: string; exclusionId: string; reason: string; personId: string },
): Promise<void> {
  await trx
    .insertInto('exclusion_lifted')
    .values({
      study_id: row.studyId,
      exclusion_id: row.exclusionId,
      reason: row.reason,
      lifted_by: row.personId,
    })
    .execute()
}
