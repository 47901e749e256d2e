import { DateTime } from 'luxon'

export interface ShownTime {
  /** "14 Mar 2027, 17:00" */
  readonly text: string
  /** "Lisbon (UTC+0)" */
  readonly zoneText: string
  /** Machine-readable instant. */
  readonly iso: string
}

/** An instant as shown to a person: always with its day, its zone's name and its offset. */
export function showTime(instant: Date | string, zone: string): ShownTime {
  const time = (instant instanceof Date ? DateTime.fromJSDate(instant) : DateTime.fromISO(instant))
    .setZone(zone)
    .setLocale('en-GB')
  return {
    text: time.toFormat('d LLL yyyy, HH:mm'),
    zoneText: `${placeOf(zone)} (UTC${offsetOf(time)})`,
    iso: time.toUTC().toISO() ?? '',
  }
}

/** A day alone: "14 Mar 2027". */
export function showDay(instant: Date | string, zone: string): string {
  return (instant instanceof Date ? DateTime.fromJSDate(instant) : DateTime.fromISO(instant))
    .setZone(zone)
    .setLocale('en-GB')
    .toFormat('d LLL yyyy')
}

/** "in 3 days", "in 26 hours", "2 days ago": whole units, rounded down, hours below two days. */
export function showDistance(from: Date, to: Date): string {
  const minutes = Math.floor(Math.abs(to.getTime() - from.getTime()) / 60_000)
  const [count, unit] =
    minutes < 60
      ? [minutes, 'minute']
      : minutes < 48 * 60
        ? [Math.floor(minutes / 60), 'hour']
        : [Math.floor(minutes / 1440), 'day']
  const words = `${count} ${unit}${count === 1 ? '' : 's'}`
  return to >= from ? `in ${words}` : `${words} ago`
}

function placeOf(zone: string): string {
  return (zone.split('/').at(-1) ?? zone).replaceAll('_', ' ')
}

function offsetOf(time: DateTime): string {
  const minutes = Math.abs(time.offset)
  const rest = minutes % 60
  return `${time.offset < 0 ? '−' : '+'}${Math.floor(minutes / 60)}${rest ? `:${String(rest).padStart(2, '0')}` : ''}`
}
