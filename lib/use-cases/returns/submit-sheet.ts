import type { Context } from '@/lib/context'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { readParticipation } from './read-participation'
import { submitReturn, type SubmissionOutcome } from './submit-return'

interface CheckedSheet {
  readonly studyId: string
  readonly submissionKey: string
  /** Texts by the position of their place, as the page that was checked showed them. */
  readonly checked: readonly string[]
  readonly remark: string
}

/** Returns a sheet as it was checked, whatever its draft has become since. */
export async function submitSheet(
  context: Context,
  { studyId, submissionKey, checked, remark }: CheckedSheet,
): Promise<{ studyId: string; outcome: SubmissionOutcome }> {
  const { layout } = await readParticipation(context, { studyId })
  const entries = Object.fromEntries(
    listPlaces(layout).map((place, position) => [placeKey(place), checked[position] ?? '']),
  )
  return { studyId, outcome: await submitReturn(context, { studyId, submissionKey, entries, remark }) }
}
