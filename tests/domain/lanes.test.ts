import { describe, expect, it } from 'vitest'
import { arrangeLanes, readLanesWish } from '@/lib/domain/arrange-lanes'
import { describeLane, type Lane } from '@/lib/domain/describe-lane'
import { lanesCsv } from '@/lib/domain/lanes-csv'

const lane: Lane = {
  code: 'K47',
  state: 'not begun',
  acceptedAt: '2027-01-08T10:00:00.000Z',
  draftSavedAt: null,
  draftEntries: 0,
  returnedAt: null,
  returns: 0,
  results: 0,
  extendedTo: null,
  asksForTime: false,
}
const drafted: Lane = {
  ...lane,
  code: 'B25',
  state: 'in draft',
  draftEntries: 31,
  draftSavedAt: '2027-03-01T10:00:00.000Z',
}
const returned: Lane = {
  ...lane,
  code: 'R88',
  state: 'returned',
  returns: 2,
  results: 58,
  returnedAt: '2027-03-02T10:00:00.000Z',
}
const late: Lane = { ...lane, code: 'M23', state: 'late' }
const round = { now: '2027-03-01T17:00:00.000Z', dueAt: '2027-03-14T17:00:00.000Z', places: 60 }

describe('a lane', () => {
  it.each([
    [lane, round.now, 'not begun', 'quiet'],
    [drafted, round.now, 'in draft', 'going'],
    [drafted, '2027-03-13T15:00:00.000Z', 'due in 26 hours', 'warn'],
    [{ ...drafted, extendedTo: '2027-03-20T17:00:00.000Z' }, '2027-03-13T15:00:00.000Z', 'in draft', 'going'],
    [late, '2027-03-16T18:00:00.000Z', 'was due 2 days ago', 'danger'],
    [{ ...late, asksForTime: true }, '2027-03-16T18:00:00.000Z', 'asks for more time', 'warn'],
    [returned, round.now, 'returned, version 2, 2 without a value', 'done'],
    [{ ...returned, returns: 1, results: 60, asksForTime: true }, round.now, 'returned', 'done'],
  ])('%# stands as it is said', (each, now, words, tone) => {
    expect(describeLane(each, { ...round, now })).toEqual({ words, tone })
  })
})

describe('lanes', () => {
  const lanes = [returned, lane, drafted, late]
  const codes = (query: Record<string, string>) =>
    arrangeLanes(lanes, readLanesWish(query)).map(({ code }) => code)

  it.each([
    [{}, ['B25', 'K47', 'M23', 'R88']],
    [{ sort: '-code' }, ['R88', 'M23', 'K47', 'B25']],
    [{ sort: 'returned' }, ['R88', 'B25', 'K47', 'M23']],
    [{ sort: 'values' }, ['K47', 'M23', 'B25', 'R88']],
    [{ sort: 'state' }, ['M23', 'K47', 'B25', 'R88']],
    [{ state: 'late' }, ['M23']],
    [{ state: 'nonsense', sort: 'nonsense' }, ['B25', 'K47', 'M23', 'R88']],
  ])('are arranged as the address %j wishes', (query, expected) => {
    expect(codes(query as Record<string, string>)).toEqual(expected)
  })

  it('are left in the order they were given in', () => {
    codes({ sort: '-values' })
    expect(lanes.map(({ code }) => code)).toEqual(['R88', 'K47', 'B25', 'M23'])
  })

  it('make a file with one row each, by code', () => {
    expect(lanesCsv({ places: 60, lanes: [returned] })).toBe(
      'code,state,accepted,draft saved,draft values,returned,version,values,asked,extended to\r\n' +
        'R88,returned,2027-01-08T10:00:00.000Z,,0,2027-03-02T10:00:00.000Z,2,58,60,\r\n',
    )
  })
})
