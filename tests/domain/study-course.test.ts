import { describe, expect, it } from 'vitest'
import { courseOf, type CourseFacts } from '@/lib/domain/study-course'

const facts: CourseFacts = {
  study: { state: 'open' },
  layout: { materials: [1, 2, 3, 4, 5] },
  counts: { invited: 12, accepted: 10, declined: 1, returned: 9, committee: 3 },
  analysis: null,
  computing: false,
  proposed: false,
  publishedAs: null,
}

function stationsOf(changed: Partial<CourseFacts>): Record<string, string> {
  return Object.fromEntries(
    courseOf({ ...facts, ...changed }).map(({ key, state, phase }) => [key, `${state} (${phase})`]),
  )
}

describe('the course of a study, in words', () => {
  it('has nine stations in one order, whatever the state', () => {
    const names = [
      'Plan',
      'Materials',
      'Laboratories',
      'Dispatch',
      'Results',
      'Scrutiny',
      'Precision',
      'Review',
      'Report',
    ]
    for (const state of ['draft', 'open', 'closed', 'in-review', 'published'] as const)
      expect(courseOf({ ...facts, study: { state } }).map(({ name }) => name)).toEqual(names)
  })

  it('of a draft says what is still open', () => {
    const counts = { invited: 0, accepted: 0, declined: 0, returned: 0, committee: 0 }
    expect(stationsOf({ study: { state: 'draft' }, counts, layout: { materials: [1] } })).toMatchObject({
      plan: 'draft (open)',
      materials: '1 even lot (open)',
      laboratories: 'none named yet (open)',
      results: 'not open yet (later)',
      scrutiny: 'after returns (later)',
      review: 'no committee yet (later)',
      report: 'not proposed (later)',
    })
  })

  it('of an open study counts who accepted and who returned', () => {
    expect(stationsOf({})).toMatchObject({
      plan: 'settled (done)',
      laboratories: '10 of 12 accepted (open)',
      results: '9 of 10 returned (open)',
      scrutiny: 'not computed yet (open)',
      precision: 'after scrutiny (later)',
    })
  })

  it('takes the laboratories as done when each has answered', () => {
    expect(stationsOf({ counts: { ...facts.counts, declined: 2 } }).laboratories).toBe(
      '10 of 12 accepted (done)',
    )
  })

  it('says when an analysis is being computed, is out of date, or stands', () => {
    const study = { state: 'closed' } as const
    expect(stationsOf({ study, computing: true }).scrutiny).toBe('being computed (open)')
    expect(stationsOf({ study, analysis: { number: 2, upToDate: false } })).toMatchObject({
      scrutiny: 'out of date (open)',
      precision: 'out of date (open)',
    })
    expect(stationsOf({ study, analysis: { number: 2, upToDate: true } })).toMatchObject({
      scrutiny: 'analysis 2 (open)',
      precision: 'from analysis 2 (open)',
    })
  })

  it('ends with what is published', () => {
    const analysis = { number: 2, upToDate: true }
    expect(stationsOf({ study: { state: 'in-review' }, analysis, proposed: true })).toMatchObject({
      scrutiny: 'analysis 2 (done)',
      review: 'with 3 members (open)',
      report: 'proposal waiting (open)',
    })
    expect(stationsOf({ study: { state: 'published' }, analysis, publishedAs: 'hc-27' })).toMatchObject({
      review: '3 members (done)',
      report: 'published (done)',
    })
  })
})
