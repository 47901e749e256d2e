import { describe, expect, it } from 'vitest'
import { foreseePrecision, innerLevelsOf } from '@/lib/use-cases/studies/foresee-precision'

const days = [
  { name: 'day', count: 2 },
  { name: 'replicate', count: 2 },
]
const assumptions = { ratio: 2, shares: [0.4], within: 0.3 }

describe('what a plan will know', () => {
  it('has a curve for each figure, from the inside outwards', () => {
    const { figures, points, draws, laboratoryShare } = foreseePrecision({
      levels: days,
      expected: 0,
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
    const { figures, points } = foreseePrecision({ levels: days, expected: 0, assumptions })
    figures.forEach(({ least }, series) => {
      const first = points.find(({ halfWidths }) => halfWidths[series]! <= assumptions.within)
      expect(first!.laboratories).toBe(least)
    })
  })

  it('uses the formulas where no level is nested: A_r = 1.96/√(2p(n − 1)) is 0.3 at 21.3', () => {
    const levels = [{ name: 'replicate', count: 2 }]
    const { figures, points, draws } = foreseePrecision({ levels, expected: 0, assumptions })
    expect(figures[0]).toEqual({ kind: 'repeatability', varies: [], least: 22 })
    expect(figures).toHaveLength(2)
    expect(points[4]).toMatchObject({ laboratories: 8 })
    expect(points[4]!.halfWidths[0]).toBeCloseTo(0.49, 12)
    expect(draws).toBeNull()
  })

  it('says where the formulas are too small, and nothing of it where levels are simulated', () => {
    const near = { ...assumptions, ratio: 1 }
    const levels = [{ name: 'replicate', count: 2 }]
    expect(foreseePrecision({ levels, expected: 0, assumptions: near }).isFirstOrderPoor).toBe(true)
    expect(foreseePrecision({ levels, expected: 0, assumptions }).isFirstOrderPoor).toBe(false)
    expect(foreseePrecision({ levels: days, expected: 0, assumptions: near }).isFirstOrderPoor).toBe(false)
  })

  it('leaves repeatability out where each innermost group holds one result', () => {
    const levels = [
      { name: 'day', count: 2 },
      { name: 'replicate', count: 1 },
    ]
    const { figures, points } = foreseePrecision({ levels, expected: 0, assumptions })
    expect(figures.map(({ kind }) => kind)).toEqual(['intermediate', 'reproducibility'])
    expect(points.every(({ halfWidths }) => halfWidths.length === 2)).toBe(true)
  })

  it('leaves out a level of one group, which nothing tells from the level around it', () => {
    const levels = [{ name: 'operator', count: 1 }, ...days]
    expect(innerLevelsOf(levels)).toEqual([days[0]])
    const asked = { expected: 0, assumptions }
    expect(foreseePrecision({ levels, ...asked })).toEqual(foreseePrecision({ levels: days, ...asked }))
  })

  it('goes on to the laboratories expected, within reason', () => {
    const last = (expected: number) =>
      foreseePrecision({ levels: days, expected, assumptions }).points.at(-1)!.laboratories
    expect(last(12)).toBe(30)
    expect(last(41)).toBe(41)
    expect(last(400)).toBe(60)
  })

  it('finds no number where a thousand laboratories are too few', () => {
    const far = { ...assumptions, within: 0.01 }
    for (const levels of [days, days.slice(1)]) {
      const { figures } = foreseePrecision({ levels, expected: 0, assumptions: far })
      expect(figures.at(-1)!.least).toBeNull()
    }
  })
})
