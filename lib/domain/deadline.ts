import { Temporal } from 'temporal-polyfill'
import { Refusal } from './errors'
import { isTimeZone } from './time-zones'

export interface Deadline {
  /** ISO 8601 instant in UTC. */
  readonly at: string
  readonly zone: string
  /** What was meant, as "2027-03-14T17:00". */
  readonly localTime: string
}

/**
 * A deadline as meant in a zone, and the instant that is.
 *
 * A local time that a clock change skips, or shows twice, is never settled silently: the person is told and picks.
 * @param choice for a time shown twice: which of the two
 * @throws {Refusal} `bad-time`, `bad-zone`, `time-skipped`, `time-twice`
 */
export function readDeadline(localTime: string, zone: string, choice?: 'earlier' | 'later'): Deadline {
  const meant = parseLocalTime(localTime)
  requireZone(zone)
  const earlier = meant.toZonedDateTime(zone, { disambiguation: 'earlier' })
  const later = meant.toZonedDateTime(zone, { disambiguation: 'later' })
  if (!earlier.toPlainDateTime().equals(meant) || !later.toPlainDateTime().equals(meant)) {
    const before = clockTime(earlier)
    const after = clockTime(later)
    throw new Refusal(
      'time-skipped',
      `On that day clocks in ${zone} go forward and ${clockTime(meant)} does not occur. Choose ${before} or ${after} instead.`,
      'localTime',
    )
  }
  if (!earlier.equals(later) && !choice) {
    throw new Refusal(
      'time-twice',
      `On that day clocks in ${zone} go back and ${clockTime(meant)} occurs twice: first at UTC${earlier.offset}, again at UTC${later.offset}. Say which you mean.`,
      'choice',
    )
  }
  const settled = choice === 'later' ? later : earlier
  return { at: settled.toInstant().toString(), zone, localTime: meant.toString({ smallestUnit: 'minute' }) }
}

function parseLocalTime(text: string): Temporal.PlainDateTime {
  if (!/^\d{4}-\d\d-\d\dT\d\d:\d\d$/.test(text)) throw badTime()
  try {
    return Temporal.PlainDateTime.from(text, { overflow: 'reject' })
  } catch {
    throw badTime()
  }
}

function badTime(): Refusal {
  return new Refusal('bad-time', 'Give a day and a time, such as 14 March 2027, 17:00.', 'localTime')
}

function requireZone(zone: string): void {
  if (!isTimeZone(zone))
    throw new Refusal(
      'bad-zone',
      `“${zone}” is not a time zone known here; choose one such as Europe/Lisbon.`,
      'zone',
    )
}

function clockTime(time: { hour: number; minute: number }): string {
  return `${String(time.hour).padStart(2, '0')}:${String(time.minute).padStart(2, '0')}`
}
