import { findAnalysisRequest, insertAnalysis } from '@/db/queries/analyses'
import { lockStudy } from '@/db/queries/studies'
import type { AnonymousContext } from '@/lib/context'
import { digestText } from '@/lib/domain/coded-results'
import { canonicalJson } from '@/lib/domain/audit-entry'
import { engineVersion } from '@/lib/domain/engine'
import { analyse } from '@/lib/statistics'
import { recordAudit } from '../record-audit'
import { gatherInputs, type MeasurandInput } from './analysis-input'

/**
 * Computes a requested analysis and keeps it as a snapshot. Running twice is harmless: what is made stays.
 * The study's row is held for reading only while the input is gathered; the computing holds nothing.
 */
export async function makeAnalysis(
  context: AnonymousContext,
  { studyId, number }: { studyId: string; number: number },
): Promise<void> {
  const request = await findAnalysisRequest(context.db, { studyId, number })
  if (!request || request.analysisId) return
  const limitFactor = request.limitFactor === '2.77' ? 1.96 * Math.SQRT2 : Number(request.limitFactor)
  const inputs = await context.db.transaction().execute(async (trx) => {
    await lockStudy(trx, studyId, 'share')
    return gatherInputs(trx, studyId)
  })
  const documents = inputs.map((input) => ({
    measurandId: input.measurandId,
    csv: input.csv,
    inputDigest: input.digest,
    document: JSON.stringify(analyseMeasurand(input, limitFactor)),
  }))
  const settings = canonicalJson({ limitFactor })
  const digest = digestText(
    canonicalJson([
      engineVersion,
      settings,
      documents.map(({ inputDigest, document }) => [inputDigest, digestText(document)]),
    ]),
  )
  await context.db.transaction().execute(async (trx) => {
    await lockStudy(trx, studyId)
    const again = await findAnalysisRequest(trx, { studyId, number })
    if (!again || again.analysisId) return
    const analysisId = await insertAnalysis(trx, {
      studyId,
      number,
      engineVersion,
      settings,
      digest,
      documents,
    })
    await recordAudit(trx, {
      actor: null,
      role: 'server',
      studyId,
      fact: { action: 'analysis.made', version: 1, analysisId, number, digest, engineVersion },
    })
  })
}

function analyseMeasurand(input: MeasurandInput, limitFactor: number) {
  return analyse({
    results: input.results.map(({ code, material, groups, value, censored, excluded }) => ({
      laboratory: code,
      material,
      measurand: null,
      groups: groups.slice(0, -1).map(String),
      text: value,
      censored,
      excluded,
    })),
    nesting: input.nesting,
    settings: { limitFactor, trueZero: input.hasTrueZero },
    sha256: input.digest,
    version: engineVersion,
  })
}
