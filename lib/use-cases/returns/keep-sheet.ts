import type { Context } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'
import { readReportedValue } from '@/lib/domain/reported-value'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { readEntries } from './read-entries'
import { readParticipation } from './read-participation'
import { saveDraft } from './save-draft'

export interface TypedSheet {
  readonly studyId: string
  /** By the position of each place in the form; a position the page did not send is empty. */
  readonly cells: ReadonlyMap<number, string>
  readonly remark: string
  readonly seenVersion: number
  /** What the comma of values such as 1,234 was said to be. */
  readonly commaIs?: 'decimal' | 'thousands'
}

/**
 * Keeps a sheet sent as a whole, as its draft, and says whether it could be returned as it stands.
 * @throws {Refusal} `stale-draft` when another page wrote since: nothing is overwritten unseen
 */
export async function keepSheet(
  context: Context,
  typed: TypedSheet,
): Promise<{ studyId: string; problems: number }> {
  const { studyId, cells, remark, seenVersion } = typed
  const { layout } = await readParticipation(context, { studyId })
  const entries = Object.fromEntries(
    listPlaces(layout).map((place, position) => [
      placeKey(place),
      settleComma(cells.get(position) ?? '', typed.commaIs),
    ]),
  )
  const kept = await saveDraft(context, { studyId, entries, remark, seenVersion })
  if (kept.outcome === 'changed-elsewhere' && !isSame(entries, kept.entries))
    throw new Refusal(
      'stale-draft',
      'The draft was changed on another page meanwhile. What you sent is below: send it again to keep it in place of the other, or open the sheet afresh to see the other.',
    )
  return { studyId, problems: readEntries(layout, entries).problems.length }
}

function settleComma(text: string, commaIs: TypedSheet['commaIs']): string {
  if (!commaIs) return text
  const read = readReportedValue(text)
  if (read.kind !== 'ambiguous') return text
  return read.readings[commaIs === 'decimal' ? 0 : 1]
}

function isSame(one: Readonly<Record<string, string>>, other: Readonly<Record<string, string>>): boolean {
  const keys = new Set([...Object.keys(one), ...Object.keys(other)])
  return [...keys].every((key) => (one[key] ?? '') === (other[key] ?? ''))
}
