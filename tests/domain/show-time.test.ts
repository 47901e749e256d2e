import { describe, expect, it } from 'vitest'
import { showDay, showDistance, showTime } from '@/lib/domain/show-time'

describe('a time as shown', () => {
  it.each([
    ['Europe/Lisbon', '14 Mar 2027, 17:00', 'Lisbon (UTC+0)'],
    ['America/New_York', '14 Mar 2027, 13:00', 'New York (UTC−4)'],
    ['Asia/Kathmandu', '14 Mar 2027, 22:45', 'Kathmandu (UTC+5:45)'],
    ['Pacific/Auckland', '15 Mar 2027, 06:00', 'Auckland (UTC+13)'],
    ['America/Argentina/Buenos_Aires', '14 Mar 2027, 14:00', 'Buenos Aires (UTC−3)'],
  ])('names day and zone in %s', (zone, text, zoneText) => {
    expect(showTime('2027-03-14T17:00:00Z', zone)).toEqual({
      text,
      zoneText,
      iso: '2027-03-14T17:00:00.000Z',
    })
  })

  it('is the same from a date and from its text', () => {
    expect(showTime(new Date('2027-03-14T17:00:00Z'), 'UTC')).toEqual(showTime('2027-03-14T17:00:00Z', 'UTC'))
  })

  it('tells the two hours of a night with a clock change apart by their offset', () => {
    expect(showTime('2027-10-31T00:30:00Z', 'Europe/Berlin')).toMatchObject({
      text: '31 Oct 2027, 02:30',
      zoneText: 'Berlin (UTC+2)',
    })
    expect(showTime('2027-10-31T01:30:00Z', 'Europe/Berlin')).toMatchObject({
      text: '31 Oct 2027, 02:30',
      zoneText: 'Berlin (UTC+1)',
    })
  })

  it('gives a day alone in the zone it is read in', () => {
    expect(showDay('2027-03-14T23:30:00Z', 'Europe/Berlin')).toBe('15 Mar 2027')
    expect(showDay(new Date('2027-03-14T23:30:00Z'), 'UTC')).toBe('14 Mar 2027')
  })

  const now = new Date('2027-03-14T17:00:00Z')
  it.each([
    [30_000, 'in 0 minutes'],
    [60_000, 'in 1 minute'],
    [59.9 * 60_000, 'in 59 minutes'],
    [60 * 60_000, 'in 1 hour'],
    [26.9 * 3_600_000, 'in 26 hours'],
    [47.99 * 3_600_000, 'in 47 hours'],
    [48 * 3_600_000, 'in 2 days'],
    [-3 * 86_400_000, '3 days ago'],
    [-3_600_000, '1 hour ago'],
  ])('says %d ms from now as “%s”', (distance, words) => {
    expect(showDistance(now, new Date(now.getTime() + distance))).toBe(words)
  })
})
