import { showDistance } from './show-time'

/** One laboratory's way through a round, known by its code. Instants are ISO 8601 texts. */
export interface Lane {
  readonly code: string
  readonly state: 'returned' | 'in draft' | 'not begun' | 'late'
  readonly acceptedAt: string | null
  readonly draftSavedAt: string | null
  readonly draftEntries: number
  readonly returnedAt: string | null
  readonly returns: number
  readonly results: number
  readonly extendedTo: string | null
  readonly asksForTime: boolean
}

export interface Round {
  readonly now: string
  readonly dueAt: string
  readonly places: number
}

export interface LaneWords {
  readonly tone: 'done' | 'going' | 'quiet' | 'warn' | 'danger'
  readonly words: string
}

const soon = 48 * 3_600_000

/** How a lane stands, in words that judge nobody. */
export function describeLane(lane: Lane, { now, dueAt, places }: Round): LaneWords {
  const from = new Date(now)
  const due = laneDue(lane, dueAt)
  if (lane.returns > 0)
    return { tone: 'done', words: ['returned', ...version(lane), ...gaps(lane, places)].join(', ') }
  if (lane.asksForTime) return { tone: 'warn', words: 'asks for more time' }
  if (lane.state === 'late') return { tone: 'danger', words: `was due ${showDistance(from, due)}` }
  const begun = lane.draftEntries > 0
  if (due.getTime() - from.getTime() <= soon) return { tone: 'warn', words: `due ${showDistance(from, due)}` }
  return begun ? { tone: 'going', words: 'in draft' } : { tone: 'quiet', words: 'not begun' }
}

/** When a lane's results are due: the round's deadline, or later where more time was given. */
export function laneDue({ extendedTo }: Pick<Lane, 'extendedTo'>, dueAt: string): Date {
  const due = new Date(dueAt)
  const extended = extendedTo === null ? due : new Date(extendedTo)
  return extended > due ? extended : due
}

function version({ returns }: Lane): string[] {
  return returns > 1 ? [`version ${returns}`] : []
}

function gaps({ results }: Lane, places: number): string[] {
  const missing = places - results
  return missing > 0 ? [`${missing} without a value`] : []
}
