import type { Kysely } from 'kysely'
import { findLatestAnalysis, listCodedResults } from '@/db/queries/analyses'
import { readLayout } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import { codedResultsCsv, digestText, type CodedResult } from '@/lib/domain/coded-results'

export interface MeasurandInput {
  readonly measurandId: string
  readonly hasTrueZero: boolean
  readonly nesting: readonly string[]
  readonly results: readonly CodedResult[]
  readonly csv: string
  readonly digest: string
}

/** What an analysis made now would be made of, one input a measurand. */
export async function gatherInputs(db: Kysely<DB>, studyId: string): Promise<MeasurandInput[]> {
  const { measurands, levels } = await readLayout(db, studyId)
  const inputs: MeasurandInput[] = []
  for (const { measurandId, hasTrueZero } of measurands) {
    const results = await listCodedResults(db, { studyId, measurandId })
    const csv = codedResultsCsv(levels, results)
    inputs.push({
      measurandId,
      hasTrueZero,
      nesting: levels.slice(0, -1).map(({ name }) => name),
      results,
      csv,
      digest: digestText(csv),
    })
  }
  return inputs
}

/** The latest analysis, and whether returns and decisions are still those it was made of. */
export async function findCurrentAnalysis(db: Kysely<DB>, studyId: string) {
  const latest = await findLatestAnalysis(db, studyId)
  if (!latest) return undefined
  const inputs = await gatherInputs(db, studyId)
  const upToDate = inputs.every(({ measurandId, digest }) => latest.inputs.get(measurandId) === digest)
  return { ...latest, upToDate }
}
