import { readClock } from '@/db/queries/clock'
import { findDraft, type DraftRecord } from '@/db/queries/participations'
import { listReceipts, listReportedTexts, type ReceiptRecord } from '@/db/queries/returns'
import { readLayout } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { showDistance, showTime, type ShownTime } from '@/lib/domain/show-time'
import { listPlaces, placeKey, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { ownDeadline, ownParticipation } from './own-participation'
import { toReturnLayout } from './return-layout'

export interface ParticipationView {
  readonly studyId: string
  readonly code: string
  readonly laboratory: string
  readonly zone: string
  readonly study: { shortName: string; title: string; method: string; purpose: string; organisation: string }
  readonly layout: ReturnLayout
  readonly places: number
  readonly due: ShownTime
  /** "in 3 days" or "2 days ago" */
  readonly dueDistance: string
  readonly canReturn: boolean
  readonly whyNot: 'after-deadline' | 'not-open' | null
  readonly draft: DraftRecord | null
  readonly receipts: readonly ReceiptRecord[]
}

/** A laboratory's own page of a study: what is asked, until when in its own time, and what it has returned. */
export async function readParticipation(
  context: Context,
  { studyId }: { studyId: string },
): Promise<ParticipationView> {
  const own = await ownParticipation(context.db, context, { studyId, action: 'return.read' })
  const { study, participation } = own
  const place = { studyId, participantId: participation.participantId }
  const [now, layoutRecord, draft, receipts] = await Promise.all([
    readClock(context.db),
    readLayout(context.db, studyId),
    findDraft(context.db, place),
    listReceipts(context.db, place),
  ])
  const dueAt = ownDeadline(own)
  const layout = toReturnLayout(study.shortName, layoutRecord)
  const whyNot = study.state !== 'open' ? 'not-open' : now > dueAt ? 'after-deadline' : null
  const { shortName, title, method, purpose, organisation } = study
  return {
    studyId,
    code: participation.code,
    laboratory: participation.laboratory,
    zone: participation.zone,
    study: { shortName, title, method, purpose, organisation },
    layout,
    places: listPlaces(layout).length,
    due: showTime(dueAt, participation.zone),
    dueDistance: showDistance(now, dueAt),
    canReturn: whyNot === null,
    whyNot,
    draft: draft ?? null,
    receipts,
  }
}

/** What the sheet opens with: the draft, or else the last return, ready to be replaced. */
export async function readSheet(context: Context, { studyId }: { studyId: string }) {
  const view = await readParticipation(context, { studyId })
  const last = view.receipts[0]
  const entries: Record<string, string> = { ...(view.draft?.entries ?? {}) }
  if (!view.draft && last) {
    for (const row of await listReportedTexts(context.db, { studyId, returnId: last.returnId }))
      entries[placeKey(row)] = row.text
  }
  return {
    view,
    entries,
    remark: view.draft?.remark ?? (last ? last.remark : ''),
    draftVersion: view.draft?.version ?? 0,
    // The same on every page that would follow the same return: two tabs, a reload or a way back make one return.
    submissionKey: `sheet-after-${last?.number ?? 0}`,
  }
}
