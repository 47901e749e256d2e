import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { equalProposals } from '@/lib/statistics'

const scores = (...given: number[]) =>
  equalProposals(given.map((score) => ({ score }))).map((group) => group.map(({ score }) => score))

describe('explanations that count as equally likely', () => {
  it('are those within 0.3 of the best', () => {
    expect(scores(9.1, 8.9, 4)).toEqual([[9.1, 8.9], [4]])
    expect(scores(9.1, 8.79)).toEqual([[9.1], [8.79]])
    expect(scores(9.1, 5.2, 5.2)).toEqual([[9.1], [5.2, 5.2]])
  })

  it('are those exactly 0.3 below too, though the doubles of 10 and 9.7 differ by more', () => {
    expect(10 - 9.7).toBeGreaterThan(0.3)
    expect(scores(10, 9.7)).toEqual([[10, 9.7]])
  })

  it('do not pass from neighbour to neighbour: the third here lies 0.4 below the first', () => {
    expect(scores(9, 8.8, 8.6)).toEqual([[9, 8.8], [8.6]])
  })

  it('are none where nothing is proposed', () => {
    expect(equalProposals([])).toEqual([])
  })

  it('keep every proposal in its place, no group wider than 0.3 and none that the next could have joined', () => {
    const given = fc
      .array(fc.double({ min: 2, max: 5, noNaN: true }), { maxLength: 12 })
      .map((all) => all.sort((one, other) => other - one))
    fc.assert(
      fc.property(given, (falling) => {
        const groups = scores(...falling)
        expect(groups.flat()).toEqual(falling)
        for (const group of groups) expect(group[0]! - group.at(-1)!).toBeLessThan(0.3 + 1e-6)
        groups.slice(1).forEach((group, index) => {
          expect(groups[index]![0]! - group[0]!).toBeGreaterThan(0.3)
        })
      }),
      { seed: 20261201 },
    )
  })
})
