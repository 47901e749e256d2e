import { describe, expect, it } from 'vitest'
import { foreseePrecision, innerLevelsOf } from '@/lib/domain/foresee-precision'
import { readPlanAssumptions } from '@/lib/domain/read-plan-assumptions'

const days = [
  { name: 'day', count: 2 },
  { name: 'replicate', count: 2 },
]
const assumptions = { ratio: 2, shares: [0.4], within: 0.3 }

describe('what a plan will know', () => {
  it('has a curve for each figure, from the inside outwards', () => {
    const { figures, points, draws, laboratoryShare } = foreseePrecision({
      levels: days,
      invited: 0,
      assumptions,
    })
    expect(figures.map(({ kind, varies }) => [kind, ...varies])).toEqual([
      ['repeatability'],
      ['intermediate', 'day'],
      ['reproducibility'],
    ])
    expect(points[0]!.laboratories).toBe(4)
    expect(points.at(-1)!.laboratories).toBe(30)
    expect(draws).toBe(10_000)
    expect(laboratoryShare).toBeCloseTo(0.6, 12)
  })

  it('names the first number of laboratories at which each curve is low enough', () => {
    const { figures, points } = foreseePrecision({ levels: days, invited: 0, assumptions })
    figures.forEach(({ least }, series) => {
      const first = points.find(({ halfWidths }) => halfWidths[series]! <= assumptions.within)
      expect(first!.laboratories).toBe(least)
    })
  })

  it('uses the formulas where no level is nested: A_r = 1.96/√(2p(n − 1)) is 0.3 at 21.3', () => {
    const levels = [{ name: 'replicate', count: 2 }]
    const { figures, points, draws } = foreseePrecision({ levels, invited: 0, assumptions })
    expect(figures[0]).toEqual({ kind: 'repeatability', varies: [], least: 22 })
    expect(figures).toHaveLength(2)
    expect(points[4]).toMatchObject({ laboratories: 8 })
    expect(points[4]!.halfWidths[0]).toBeCloseTo(0.49, 12)
    expect(draws).toBeNull()
  })

  it('says where the formulas are too small, and nothing of it where levels are simulated', () => {
    const near = { ...assumptions, ratio: 1 }
    const levels = [{ name: 'replicate', count: 2 }]
    expect(foreseePrecision({ levels, invited: 0, assumptions: near }).isFirstOrderPoor).toBe(true)
    expect(foreseePrecision({ levels, invited: 0, assumptions }).isFirstOrderPoor).toBe(false)
    expect(foreseePrecision({ levels: days, invited: 0, assumptions: near }).isFirstOrderPoor).toBe(false)
  })

  it('leaves repeatability out where each innermost group holds one result', () => {
    const levels = [
      { name: 'day', count: 2 },
      { name: 'replicate', count: 1 },
    ]
    const { figures, points } = foreseePrecision({ levels, invited: 0, assumptions })
    expect(figures.map(({ kind }) => kind)).toEqual(['intermediate', 'reproducibility'])
    expect(points.every(({ halfWidths }) => halfWidths.length === 2)).toBe(true)
  })

  it('leaves out a level of one group, which nothing tells from the level around it', () => {
    const levels = [{ name: 'operator', count: 1 }, ...days]
    expect(innerLevelsOf(levels)).toEqual([days[0]])
    const asked = { invited: 0, assumptions }
    expect(foreseePrecision({ levels, ...asked })).toEqual(foreseePrecision({ levels: days, ...asked }))
  })

  it('goes on to the laboratories invited, within reason', () => {
    const last = (invited: number) =>
      foreseePrecision({ levels: days, invited, assumptions }).points.at(-1)!.laboratories
    expect(last(12)).toBe(30)
    expect(last(41)).toBe(41)
    expect(last(400)).toBe(60)
  })

  it('finds no number where a thousand laboratories are too few', () => {
    const far = { ...assumptions, within: 0.01 }
    for (const levels of [days, days.slice(1)]) {
      const { figures } = foreseePrecision({ levels, invited: 0, assumptions: far })
      expect(figures.at(-1)!.least).toBeNull()
    }
  })
})

describe('the assumptions of a plan', () => {
  it('stand at equal shares until something is typed', () => {
    expect(readPlanAssumptions({}, 1)).toEqual({
      assumptions: { ratio: 2, shares: [0.5], within: 0.3 },
      texts: { ratio: '2', 'share.0': '50', within: '30' },
      errors: {},
    })
    expect(readPlanAssumptions({}, 2).assumptions.shares).toEqual([0.33, 0.33])
    expect(readPlanAssumptions({}, 0).assumptions.shares).toEqual([])
  })

  it('are read with a decimal point or comma', () => {
    const query = { ratio: '1,5', 'share.0': ' 12.5 ', within: '25' }
    expect(readPlanAssumptions(query, 1)).toEqual({
      assumptions: { ratio: 1.5, shares: [0.125], within: 0.25 },
      texts: { ratio: '1,5', 'share.0': '12.5', within: '25' },
      errors: {},
    })
  })

  it.each(['', '0.5', '101', '1e1', '-2', 'two', '9'.repeat(400)])(
    'keep %j as typed and assume 2 in its place',
    (ratio) => {
      const { assumptions: read, texts, errors } = readPlanAssumptions({ ratio }, 0)
      expect(read.ratio).toBe(2)
      expect(texts['ratio']).toBe(ratio)
      expect(errors['ratio']).toBe('Give a number from 1 to 100; until then 2 is assumed.')
    },
  )

  it('do not share out more than there is', () => {
    const { assumptions: read, errors } = readPlanAssumptions({ 'share.0': '60', 'share.1': '41' }, 2)
    expect(read.shares).toEqual([0.33, 0.33])
    expect(errors).toEqual({ 'share.1': 'The shares come to more than 100 %; until then each is 33.' })
    expect(readPlanAssumptions({ 'share.0': '60', 'share.1': '40' }, 2).errors).toEqual({})
  })

  it('take no list for an answer', () => {
    expect(readPlanAssumptions({ ratio: ['3', '4'] }, 0).assumptions.ratio).toBe(2)
  })
})
