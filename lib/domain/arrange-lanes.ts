import type { Lane } from './describe-lane'

export const laneSorts = ['code', 'accepted', 'draft', 'returned', 'values', 'state'] as const
export type LaneSort = (typeof laneSorts)[number]

const laneStates = ['late', 'not begun', 'in draft', 'returned'] as const

export interface LanesWish {
  readonly state: Lane['state'] | null
  readonly sort: LaneSort
  readonly isReversed: boolean
}

/** What an address such as "?state=late&sort=-values" wishes to see. */
export function readLanesWish(query: Readonly<Record<string, string | string[] | undefined>>): LanesWish {
  const text = (key: string) => [query[key]].flat()[0] ?? ''
  const sort = text('sort')
  return {
    state: laneStates.find((state) => state === text('state')) ?? null,
    sort: laneSorts.find((each) => each === sort.replace(/^-/, '')) ?? 'code',
    isReversed: sort.startsWith('-'),
  }
}

export function arrangeLanes<Each extends Lane>(
  lanes: readonly Each[],
  { state, sort, isReversed }: LanesWish,
): Each[] {
  const shown = lanes
    .filter((lane) => !state || lane.state === state)
    .sort((a, b) => compare(a, b, sort) || a.code.localeCompare(b.code, 'en'))
  return isReversed ? shown.reverse() : shown
}

function compare(a: Lane, b: Lane, sort: LaneSort): number {
  switch (sort) {
    case 'accepted':
      return compareInstants(a.acceptedAt, b.acceptedAt)
    case 'draft':
      return compareInstants(a.draftSavedAt, b.draftSavedAt)
    case 'returned':
      return compareInstants(a.returnedAt, b.returnedAt)
    case 'values':
      return valuesOf(a) - valuesOf(b)
    case 'state':
      return laneStates.indexOf(a.state) - laneStates.indexOf(b.state)
    case 'code':
      return 0
  }
}

/** What never happened comes last. */
function compareInstants(a: string | null, b: string | null): number {
  return (a === null ? Infinity : Date.parse(a)) - (b === null ? Infinity : Date.parse(b)) || 0
}

export function valuesOf({ returns, results, draftEntries }: Lane): number {
  return returns > 0 ? results : draftEntries
}
