import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { orderStatistic } from '@/lib/statistics/order-statistic'

describe('a place among sorted values', () => {
  it('is found without sorting, ties or none', () => {
    const some = fc.array(fc.oneof(fc.integer({ min: 0, max: 5 }), fc.double({ noNaN: true })), {
      minLength: 1,
    })
    fc.assert(
      fc.property(some, fc.nat(), (values, nat) => {
        const rank = nat % values.length
        const sorted = Float64Array.from(values).sort()
        // Equal as numbers: 0 and −0 are told apart by sorting alone.
        expect(orderStatistic(Float64Array.from(values), rank) + 0).toBe(sorted[rank]! + 0)
      }),
      { seed: 1, numRuns: 500 },
    )
  })

  it('is found twice in the same values', () => {
    const values = Float64Array.from([5, 1, 4, 1, 3])
    expect([orderStatistic(values, 4), orderStatistic(values, 0), orderStatistic(values, 2)]).toEqual([
      5, 1, 3,
    ])
  })

  it('must be one of them', () => {
    for (const rank of [-1, 2, 0.5]) {
      expect(() => orderStatistic(Float64Array.of(1, 2), rank)).toThrow(RangeError)
    }
  })
})
