import type { Lane } from './describe-lane'

const columns = [
  'code',
  'state',
  'accepted',
  'draft saved',
  'draft values',
  'returned',
  'version',
  'values',
  'asked',
  'extended to',
] as const

/** The lanes as a file: instants in UTC, one row a laboratory, told by its code. */
export function lanesCsv({ places, lanes }: { places: number; lanes: readonly Lane[] }): string {
  const rows = lanes.map((lane) => [
    lane.code,
    lane.state,
    lane.acceptedAt ?? '',
    lane.draftSavedAt ?? '',
    lane.draftEntries,
    lane.returnedAt ?? '',
    lane.returns,
    lane.results,
    places,
    lane.extendedTo ?? '',
  ])
  // Codes, words of ours, numbers and instants: nothing here needs quoting or could be read as a formula.
  return [columns, ...rows].map((row) => `${row.join(',')}\r\n`).join('')
}
