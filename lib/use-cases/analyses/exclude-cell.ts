import type { Transaction } from 'kysely'
import {
  findParticipantByCode,
  findStandingExclusion,
  insertExclusion,
  insertExclusionLifted,
} from '@/db/queries/analyses'
import { findStudyFor, readLayout } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireReason } from '@/lib/domain/reason'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { refuseIdentifyingWords } from './refuse-identifying-words'
import { queueAnalysis } from './request-analysis'

interface CellDecision {
  readonly studyId: string
  readonly code: string
  readonly measurandId: string
  readonly materialId: string
  readonly reason: string
}

/** Sets one cell aside, with a written reason, and has the analysis made anew. The values stay on record. */
export async function excludeCell(context: Context, decision: CellDecision): Promise<void> {
  await decide(context, decision, async (trx, cell, role) => {
    if (await findStandingExclusion(trx, cell))
      throw new Refusal('already-excluded', 'This cell is set aside already.')
    const { actor } = context
    const exclusionId = await insertExclusion(trx, {
      ...cell,
      reason: decision.reason.trim(),
      personId: actor.personId,
    })
    const { studyId, participantId, measurandId, materialId } = cell
    const reason = decision.reason.trim()
    await recordAudit(trx, {
      actor,
      role,
      studyId,
      fact: {
        action: 'cell.excluded',
        version: 1,
        exclusionId,
        participantId,
        measurandId,
        materialId,
        reason,
      },
    })
  })
}

/** Takes a cell back in that was set aside; both decisions stay on record. */
export async function takeCellBack(context: Context, decision: CellDecision): Promise<void> {
  await decide(context, decision, async (trx, cell, role) => {
    const exclusionId = await findStandingExclusion(trx, cell)
    if (!exclusionId) throw new Refusal('not-excluded', 'This cell is not set aside.')
    const reason = decision.reason.trim()
    await insertExclusionLifted(trx, {
      studyId: cell.studyId,
      exclusionId,
      reason,
      personId: context.actor.personId,
    })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId: cell.studyId,
      fact: { action: 'cell.taken-back', version: 1, exclusionId, reason },
    })
  })
}

type Cell = { studyId: string; participantId: string; measurandId: string; materialId: string }

async function decide(
  context: Context,
  decision: CellDecision,
  record: (trx: Transaction<DB>, cell: Cell, role: string) => Promise<void>,
): Promise<void> {
  requireReason(decision.reason)
  const { studyId, measurandId, materialId } = decision
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'cell.exclude', study)
    requireState(study.state, 'closed')
    const layout = await readLayout(trx, studyId)
    const participantId = await findParticipantByCode(trx, { studyId, code: decision.code })
    const known =
      layout.measurands.some((each) => each.measurandId === measurandId) &&
      layout.materials.some((each) => each.materialId === materialId)
    if (!participantId || !known) throw new NotFound('cell')
    await refuseIdentifyingWords(trx, { studyId, texts: [{ field: 'reason', text: decision.reason }] })
    await record(trx, { studyId, participantId, measurandId, materialId }, role)
    await queueAnalysis(trx, context, { studyId, role })
  })
}
