import { describe, expect, it } from 'vitest'
import { readDeadline } from '@/lib/domain/deadline'
import { Refusal } from '@/lib/domain/errors'

function refusalOf(run: () => unknown): Refusal {
  try {
    run()
  } catch (error) {
    if (error instanceof Refusal) return error
    throw error
  }
  throw new Error('nothing was refused')
}

describe('a deadline', () => {
  // Lisbon keeps UTC until 28 March 2027 (from memory: last Sunday of March).
  it('is the instant that was meant in its zone', () => {
    expect(readDeadline('2027-03-14T17:00', 'Europe/Lisbon')).toEqual({
      at: '2027-03-14T17:00:00Z',
      zone: 'Europe/Lisbon',
      localTime: '2027-03-14T17:00',
    })
    expect(readDeadline('2027-07-01T17:00', 'Europe/Lisbon').at).toBe('2027-07-01T16:00:00Z')
    expect(readDeadline('2027-03-14T17:00', 'Asia/Kathmandu').at).toBe('2027-03-14T11:15:00Z')
  })

  // Clock changes of 2027: Europe on 28 March and 31 October, the United States on 14 March and 7 November.
  it.each([
    ['2027-03-28T02:30', 'Europe/Berlin', '01:30 or 03:30'],
    ['2027-03-14T02:30', 'America/New_York', '01:30 or 03:30'],
  ])('refuses %s in %s, which clocks skip, and names the times around it', (localTime, zone, around) => {
    const refusal = refusalOf(() => readDeadline(localTime, zone))
    expect(refusal).toMatchObject({ code: 'time-skipped', field: 'localTime' })
    expect(refusal.publicMessage).toContain(around)
    expect(refusal.publicMessage).toContain('02:30 does not occur')
  })

  it.each(['earlier', 'later'] as const)('refuses a skipped time even with the choice "%s"', (choice) => {
    expect(refusalOf(() => readDeadline('2027-03-28T02:30', 'Europe/Berlin', choice)).code).toBe(
      'time-skipped',
    )
  })

  it.each([
    [
      '2027-10-31T02:30',
      'Europe/Berlin',
      '2027-10-31T00:30:00Z',
      '2027-10-31T01:30:00Z',
      'UTC+02:00',
      'UTC+01:00',
    ],
    [
      '2027-11-07T01:30',
      'America/New_York',
      '2027-11-07T05:30:00Z',
      '2027-11-07T06:30:00Z',
      'UTC-04:00',
      'UTC-05:00',
    ],
  ])(
    'asks which is meant by %s in %s, shown twice, and takes the answer',
    (localTime, zone, earlier, later, first, second) => {
      const refusal = refusalOf(() => readDeadline(localTime, zone))
      expect(refusal).toMatchObject({ code: 'time-twice', field: 'choice' })
      expect(refusal.publicMessage).toContain(first)
      expect(refusal.publicMessage).toContain(second)
      expect(readDeadline(localTime, zone, 'earlier').at).toBe(earlier)
      expect(readDeadline(localTime, zone, 'later').at).toBe(later)
    },
  )

  it.each([
    ['2027-03-28T01:59', '2027-03-28T00:59:00Z'],
    ['2027-03-28T03:00', '2027-03-28T01:00:00Z'],
    ['2027-10-31T01:59', '2027-10-30T23:59:00Z'],
    ['2027-10-31T03:00', '2027-10-31T02:00:00Z'],
  ])('takes %s in Berlin, just beside a change, without asking', (localTime, at) => {
    expect(readDeadline(localTime, 'Europe/Berlin').at).toBe(at)
  })

  it('disregards a choice where there is nothing to choose', () => {
    expect(readDeadline('2027-07-01T17:00', 'Europe/Berlin', 'later').at).toBe('2027-07-01T15:00:00Z')
  })

  it.each([
    '',
    '2027-03-14',
    '14.3.2027 17:00',
    '2027-02-30T10:00',
    '2027-03-14T25:00',
    '2027-03-14T17:00Z',
    ' 2027-03-14T17:00',
  ])('refuses “%s” as no day and time', (text) => {
    expect(refusalOf(() => readDeadline(text, 'Europe/Lisbon'))).toMatchObject({
      code: 'bad-time',
      field: 'localTime',
    })
  })

  // The runtime of today lists these under Katmandu, Calcutta and Kiev.
  it.each(['Asia/Kathmandu', 'Asia/Kolkata', 'Europe/Kyiv', 'UTC'])(
    'knows %s by its name of today',
    (zone) => {
      expect(readDeadline('2027-03-14T17:00', zone).zone).toBe(zone)
    },
  )

  it.each(['', 'Lisbon', 'Europe/Nowhere', '+01:00', 'europe/lisbon'])('refuses “%s” as no zone', (zone) => {
    expect(refusalOf(() => readDeadline('2027-03-14T17:00', zone))).toMatchObject({
      code: 'bad-zone',
      field: 'zone',
    })
  })
})
