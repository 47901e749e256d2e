import { showTime } from '@/lib/domain/show-time'
import { Refusal } from '@/lib/domain/errors'
import type { Deadline } from '@/lib/domain/deadline'

/** @throws {Refusal} `deadline-past` */
export function requireFuture(deadline: Deadline, now: Date): void {
  if (new Date(deadline.at) > now) return
  const shown = showTime(deadline.at, deadline.zone)
  throw new Refusal(
    'deadline-past',
    `${shown.text} in ${shown.zoneText} has passed; choose a later deadline.`,
    'localTime',
  )
}

/** Turns the database's refusal of a second study of one short name into words; lets everything else rise. */
export function refuseTakenShortName(error: unknown): never {
  if (error instanceof Error && 'constraint' in error && error.constraint === 'study_short_name_unique')
    throw new Refusal(
      'short-name-taken',
      'Your organisation has a study of this short name; choose another.',
      'shortName',
    )
  throw error
}
