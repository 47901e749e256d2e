import { describe, expect, it } from 'vitest'
import { chiSquaredLowerTail } from '@/lib/statistics/distributions/chi-squared'
import { chiSquaredDraws, keptChances } from '@/lib/statistics/distributions/chi-squared-draws'

const DRAWS = 20_000
const [first, second] = keptChances({ seed: 11, draws: DRAWS, streams: 2 })

/** Kolmogorov's distance between the draws and the distribution. */
function distance(draws: Float64Array, df: number): number {
  const size = draws.length
  return Math.max(
    ...draws.toSorted().map((draw, index) => {
      const below = chiSquaredLowerTail(draw, df)
      return Math.max(below - index / size, (index + 1) / size - below)
    }),
  )
}

function correlation(x: Float64Array, y: Float64Array): number {
  const mean = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0) / values.length
  const [mx, my] = [mean(x), mean(y)]
  const about = (one: Float64Array, m: number, other: Float64Array, k: number) =>
    one.reduce((sum, value, index) => sum + (value - m) * (other[index]! - k), 0)
  return about(x, mx, y, my) / Math.sqrt(about(x, mx, x, mx) * about(y, my, y, my))
}

describe('chi-squared draws', () => {
  // Kolmogorov 1933: √N times the distance stays below 1.63 in 99 of 100 samples.
  it.each([1, 2, 3, 7, 28, 400])('have the distribution on %d degrees of freedom', (df) => {
    expect(distance(chiSquaredDraws(first!, df), df) * Math.sqrt(DRAWS)).toBeLessThan(1.63)
  })

  it('are told from a neighbouring number of degrees of freedom', () => {
    expect(distance(chiSquaredDraws(first!, 28), 27) * Math.sqrt(DRAWS)).toBeGreaterThan(1.63)
  })

  it('of two streams have nothing to do with each other, of one stream nearly everything', () => {
    const own = chiSquaredDraws(first!, 7)
    expect(Math.abs(correlation(own, chiSquaredDraws(second!, 7)))).toBeLessThan(3 / Math.sqrt(DRAWS))
    expect(correlation(own, chiSquaredDraws(first!, 8))).toBeGreaterThan(0.95)
  })

  it('are the same for the same seed, whatever was drawn before, and others for another', () => {
    const drawn = (seed: number) => chiSquaredDraws(keptChances({ seed, draws: 50, streams: 1 })[0]!, 2)
    expect(drawn(3)).toEqual(drawn(3))
    expect(drawn(4)).not.toEqual(drawn(3))
    const before = chiSquaredDraws(first!, 2)
    chiSquaredDraws(first!, 5)
    expect(chiSquaredDraws(first!, 2)).toEqual(before)
  })

  it('refuse what is no seed, no number of draws, no degrees of freedom', () => {
    for (const seed of [0.5, 2 ** 31, NaN])
      expect(() => keptChances({ seed, draws: 5, streams: 1 })).toThrow(RangeError)
    expect(() => keptChances({ seed: 1, draws: 0, streams: 1 })).toThrow(RangeError)
    for (const df of [0, 1.5, 2e9]) expect(() => chiSquaredDraws(first!, df)).toThrow(RangeError)
  })
})
