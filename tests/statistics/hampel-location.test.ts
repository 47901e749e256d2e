import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hampelLocation } from '@/lib/statistics/hampel-location'

const seed = 20261203

describe("Hampel's location", () => {
  it('is the mean where nothing lies far out', () => {
    expect(hampelLocation([1, 2, 3, 4, 6], 10)).toBeCloseTo(3.2, 12)
  })

  it('leaves a value beyond four and a half spreads out altogether', () => {
    expect(hampelLocation([1, 2, 3, 1000], 2)).toBeCloseTo(2, 12)
  })

  it('takes the median where two solutions lie equally near', () => {
    // Two clusters ten spreads apart: each is a solution, and neither is the nearer.
    expect(hampelLocation([0, 0, 10, 10], 1)).toBe(5)
  })

  it('is the root nearest to the median, of all that a look at every corner finds', () => {
    const values = fc.array(
      fc.oneof(
        { weight: 6, arbitrary: fc.double({ min: -3, max: 3, noNaN: true }) },
        { weight: 2, arbitrary: fc.integer({ min: -3, max: 3 }) },
        { weight: 1, arbitrary: fc.double({ min: -1e6, max: 1e6, noNaN: true }) },
      ),
      { minLength: 1, maxLength: 25 },
    )
    fc.assert(
      fc.property(values, fc.constantFrom(0.01, 0.3, 1, 4), (all, spread) => {
        const got = hampelLocation(all, spread)
        expect(Math.abs(got - naiveLocation(all, spread))).toBeLessThanOrEqual(1e-9 * spread)
      }),
      { seed, numRuns: 2000 },
    )
  })
})

/** Every root of the sum of influences, walked through from corner to corner; the nearest to the median, or that. */
function naiveLocation(values: readonly number[], spread: number): number {
  const psi = (d: number): number => {
    const size = Math.abs(d)
    const pull = size <= 1.5 ? size : size <= 3 ? 1.5 : size <= 4.5 ? 4.5 - size : 0
    return d < 0 ? -pull : pull
  }
  const sum = (x: number): number => values.reduce((total, value) => total + psi((value - x) / spread), 0)
  const corners = values
    .flatMap((value) => [-4.5, -3, -1.5, 1.5, 3, 4.5].map((corner) => value + corner * spread))
    .sort((one, other) => one - other)
  const sorted = [...values].sort((one, other) => one - other)
  const middle = (sorted[(sorted.length - 1) >> 1]! + sorted[sorted.length >> 1]!) / 2
  const roots = corners.flatMap((corner, index) => {
    const here = sum(corner)
    if (Math.abs(here) < 1e-12) return [corner]
    if (index === 0) return []
    const [from, before] = [corners[index - 1]!, sum(corners[index - 1]!)]
    if (Math.abs(before) < 1e-12 || !(before * here < 0)) return []
    return [from + ((corner - from) * before) / (before - here)]
  })
  const nearest = Math.min(...roots.map((root) => Math.abs(root - middle)))
  const near = roots.filter((root) => Math.abs(root - middle) - nearest <= 1e-12 * spread)
  return Math.max(...near) - Math.min(...near) > 1e-12 * spread ? middle : near[0]!
}
