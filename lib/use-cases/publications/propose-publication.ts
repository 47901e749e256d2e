import type { Transaction } from 'kysely'
import { findAnonymousAnalysis, listAnonymousExclusions } from '@/db/anonymous/review'
import { findOpenProposal, insertProposal } from '@/db/queries/publications'
import { findStudyFor, readLayout, type StudyRecord } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { digestText } from '@/lib/domain/coded-results'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import type { PublicationSnapshot } from '@/lib/domain/publication-snapshot'
import { requireState } from '@/lib/domain/study-states'
import type { AnalysisDocument } from '@/lib/statistics/analysis-document'
import { findCurrentAnalysis } from '../analyses/analysis-input'
import { refuseIdentifyingWords } from '../analyses/refuse-identifying-words'
import { recordAudit } from '../record-audit'

/** Freezes what would be published and asks a second person to confirm it; nothing is public yet. */
export async function proposePublication(
  context: Context,
  { studyId }: { studyId: string },
): Promise<{ proposalId: string }> {
  return context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'publication.propose', study)
    requireState(study.state, 'in-review')
    if (await findOpenProposal(trx, studyId))
      throw new Refusal('already-proposed', 'Publication is proposed already and waits for a second person.')
    const analysis = await findCurrentAnalysis(trx, studyId)
    if (!analysis?.upToDate)
      throw new Refusal(
        'analysis-stale',
        'The analysis no longer matches the returns. Take the study back and compute it again.',
      )
    const snapshot = await freeze(trx, study)
    await refuseIdentifyingWords(trx, { studyId, texts: freeTexts(snapshot) })
    const text = JSON.stringify(snapshot)
    const digest = digestText(text)
    const { analysisId } = analysis
    const proposalId = await insertProposal(trx, {
      studyId,
      analysisId,
      snapshot: text,
      digest,
      personId: context.actor.personId,
    })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'publication.proposed', version: 1, proposalId, analysisId, digest },
    })
    return { proposalId }
  })
}

async function freeze(trx: Transaction<DB>, study: StudyRecord): Promise<PublicationSnapshot> {
  const { studyId, shortName, title, method, purpose, organisation, limitFactor } = study
  const layout = await readLayout(trx, studyId)
  const analysis = await findAnonymousAnalysis(trx, studyId)
  if (!analysis) throw new Error('an analysis just found is gone')
  const exclusions = await listAnonymousExclusions(trx, studyId)
  const documents = new Map(analysis.documents.map((each) => [each.measurandId, each]))
  return {
    version: 1,
    study: { shortName, title, method, purpose, organisation, limitFactor },
    levels: layout.levels,
    materials: layout.materials.map(({ name, description }) => ({ name, description })),
    analysis: { number: analysis.number, engineVersion: analysis.engineVersion, digest: analysis.digest },
    measurands: layout.measurands.map(({ measurandId, name, unit, decimals, hasTrueZero }) => {
      const found = documents.get(measurandId)
      if (!found) throw new Error('an analysis lacks one of the measurands')
      return {
        name,
        unit,
        decimals,
        hasTrueZero,
        document: JSON.parse(found.document) as AnalysisDocument,
        csv: found.csv,
        exclusions: exclusions
          .filter((each) => each.measurandId === measurandId)
          .map(({ code, material, reason }) => ({ code, material, reason })),
      }
    }),
  }
}

/** Every text of a snapshot that a person typed. */
function freeTexts({
  study,
  materials,
  levels,
  measurands,
}: PublicationSnapshot): { field: string; text: string }[] {
  return [
    { field: 'title', text: study.title },
    { field: 'method', text: study.method },
    { field: 'purpose', text: study.purpose },
    ...materials.map(({ name, description }) => ({ field: 'materials', text: `${name} ${description}` })),
    ...levels.map(({ name }) => ({ field: 'levels', text: name })),
    ...measurands.map(({ name }) => ({ field: 'measurands', text: name })),
    ...measurands.flatMap(({ exclusions }) =>
      exclusions.map(({ reason }) => ({ field: 'reason', text: reason })),
    ),
  ]
}
