import { findDraft, writeDraft } from '@/db/queries/participations'
import { readLayout } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { ownParticipation } from './own-participation'
import { toReturnLayout } from './return-layout'

export interface DraftInput {
  readonly studyId: string
  readonly entries: Readonly<Record<string, string>>
  readonly remark: string
  /** The version this page last saw; 0 when it saw none. */
  readonly seenVersion: number
}

export type DraftOutcome =
  | { outcome: 'kept'; version: number; savedAt: Date }
  | {
      outcome: 'changed-elsewhere'
      version: number
      entries: Readonly<Record<string, string>>
      remark: string
    }

/** Keeps what was typed, faults and all; a draft changed on another page is shown, never overwritten. */
export async function saveDraft(context: Context, input: DraftInput): Promise<DraftOutcome> {
  const { studyId, seenVersion } = input
  return context.db.transaction().execute(async (trx) => {
    const { study, participation } = await ownParticipation(trx, context, { studyId, action: 'return.draft' })
    const { participantId } = participation
    const keys = listPlaces(toReturnLayout(study.shortName, await readLayout(trx, studyId))).map(placeKey)
    const entries = Object.fromEntries(
      keys
        .filter((key) => Object.hasOwn(input.entries, key))
        .map((key) => [key, String(input.entries[key]).slice(0, 200)]),
    )
    const remark = input.remark.slice(0, 2000)
    const kept = await writeDraft(trx, {
      studyId,
      participantId,
      entries,
      remark,
      seenVersion,
      personId: context.actor.personId,
    })
    if (kept) return { outcome: 'kept', ...kept }
    const other = await findDraft(trx, { studyId, participantId })
    return {
      outcome: 'changed-elsewhere',
      version: other?.version ?? 0,
      entries: other?.entries ?? {},
      remark: other?.remark ?? '',
    }
  })
}
