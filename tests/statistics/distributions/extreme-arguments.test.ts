import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  chiSquaredLowerTail,
  chiSquaredQuantileLower,
  chiSquaredQuantileUpper,
  chiSquaredUpperTail,
} from '@/lib/statistics/distributions/chi-squared'
import { fLowerTail, fQuantileLower, fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import {
  grubbsPairLowerTail,
  grubbsPairQuantileLower,
} from '@/lib/statistics/distributions/grubbs-pair-ratio'
import { normalLowerTail, normalQuantile, normalUpperTail } from '@/lib/statistics/distributions/normal'
import { studentizedRangeUpperTail } from '@/lib/statistics/distributions/studentized-range'
import {
  tLowerTail,
  tQuantileLower,
  tQuantileUpper,
  tUpperTail,
} from '@/lib/statistics/distributions/students-t'
import { randomSource } from '@/tests/statistics/random-source'

/*
 * Arguments that no study brings, up to the ends of the doubles. Every sum and search has a bound on its steps and
 * throws an Error, which is no RangeError, where it is reached: a function that would once have run for ever fails here.
 */
const SMALLEST = Number.MIN_VALUE
const LARGEST = Number.MAX_VALUE

const random = randomSource(20)
const between = (low: number, high: number) => low + (high - low) * random.uniform()
const magnitude = (low: number, high: number) => 10 ** between(Math.log10(low), Math.log10(high))
const oneOf = <T>(values: readonly T[]): T => values[Math.floor(random.uniform() * values.length)] as T

/** Half of them anywhere between the ends on the scale of magnitudes, the rest where something changes. */
const drawDf = () =>
  random.uniform() < 0.5 ? magnitude(1e-3, 1e9) : oneOf([1e-300, 1e-12, 1e-3, 0.5, 1, 2, 3, 1e6, 1e9])
const drawShare = () => {
  const small = oneOf([magnitude(1e-308, 0.5), magnitude(1e-16, 0.5), SMALLEST, 1e-310, 2 ** -53, 0.5])
  return random.uniform() < 0.5 && small > 2 ** -54 ? 1 - small : small
}
const drawPoint = () =>
  oneOf([magnitude(1e-308, 1e308), magnitude(1e-6, 1e6), SMALLEST, 1e-310, 1, LARGEST, 0])

const cases = Array.from({ length: 4000 }, () => ({
  x: drawPoint(),
  p: drawShare(),
  df1: drawDf(),
  df2: drawDf(),
}))

/** The answer, or `beyond` where the documented refusal says that it is larger than any double. */
function answer(compute: () => number): number | 'beyond' {
  try {
    return compute()
  } catch (error) {
    if (error instanceof RangeError && /overflows$/.test(error.message)) return 'beyond'
    throw error
  }
}

function expectAll(values: readonly (number | 'beyond')[], isRight: (value: number) => boolean): void {
  const wrong = values.flatMap((value, index) => {
    return value === 'beyond' || isRight(value) ? [] : [{ ...cases[index], value }]
  })
  expect(wrong).toEqual([])
}

const isShare = (value: number) => value >= 0 && value <= 1
const isPoint = (value: number) => value >= 0 && value <= LARGEST

describe('at the ends of the doubles', () => {
  it('every tail is a share, and the two tails together are 1', () => {
    const tails = [
      [normalLowerTail, normalUpperTail],
      [tLowerTail, tUpperTail],
      [chiSquaredLowerTail, chiSquaredUpperTail],
      [fLowerTail, fUpperTail],
    ] as const
    for (const [lower, upper] of tails) {
      expectAll(
        cases.map(({ x, df1, df2 }) => lower(x, df1, df2)),
        isShare,
      )
      expectAll(
        cases.map(({ x, df1, df2 }) => upper(x, df1, df2)),
        isShare,
      )
      const sums = cases.map(({ x, df1, df2 }) => lower(x, df1, df2) + upper(x, df1, df2))
      expectAll(sums, (sum) => Math.abs(sum - 1) < 4e-14)
    }
  })

  it('every quantile is a number in its range, or is refused for being larger than any double', () => {
    expectAll(
      cases.map(({ p }) => normalQuantile(p)),
      (z) => Math.abs(z) < 39,
    )
    for (const quantile of [tQuantileLower, tQuantileUpper]) {
      expectAll(
        cases.map(({ p, df1 }) => answer(() => quantile(p, df1))),
        (t) => Math.abs(t) <= LARGEST,
      )
    }
    for (const quantile of [chiSquaredQuantileLower, chiSquaredQuantileUpper]) {
      expectAll(
        cases.map(({ p, df1 }) => answer(() => quantile(p, df1))),
        (x) => x >= 0 && x < 2e9,
      )
    }
    for (const quantile of [fQuantileLower, fQuantileUpper]) {
      expectAll(
        cases.map(({ p, df1, df2 }) => answer(() => quantile(p, df1, df2))),
        isPoint,
      )
    }
  })

  it('the studentised range and the pair ratio give shares', () => {
    const few = cases.slice(0, 60)
    const means = [2, 3, 8, 40, 1000, 1e9]
    const ranges = few.map(({ x, df1 }, index) =>
      studentizedRangeUpperTail(x, means[index % means.length] as number, df1),
    )
    expectAll(ranges, isShare)
    const counts = [4, 5, 8, 40]
    const pairs = cases.map(({ p }, index) => grubbsPairLowerTail(p, counts[index % counts.length] as number))
    expectAll(pairs, isShare)
    const ratios = cases.map(({ p }, index) =>
      grubbsPairQuantileLower(p, counts[index % counts.length] as number),
    )
    expectAll(ratios, isShare)
  })

  it('refuses the quantile of F whose odds are no double, where it once ran for ever', () => {
    // P(F > x) on 1 and 1 is 2/π atan(1/√x): x is 4/(π 1e-160)², a number of 321 digits.
    expect(() => fQuantileUpper(1e-160, 1, 1)).toThrow(/^the F quantile .* overflows$/)
    expect(() => tQuantileUpper(1e-320, 1)).toThrow(/^the t quantile .* overflows$/)
    // Its root, on 2 df below the same share, is a double: P(F > x) on (2, 2) is 1/(1 + x).
    expect(fQuantileUpper(1e-160, 2, 2)).toBeCloseTo(1e160, -148)
  })

  it('has the closed forms of F on 2 and 2, of chi-squared on 2 and of t on 1 and 2 degrees of freedom', () => {
    for (const { x, p } of cases) {
      expect(relative(fUpperTail(x, 2, 2), 1 / (1 + x))).toBeLessThan(4e-13)
      expect(relative(chiSquaredUpperTail(x, 2), Math.exp(-x / 2))).toBeLessThan(x > 700 ? 1 : 4e-13)
      expect(relative(chiSquaredLowerTail(x, 2), -Math.expm1(-x / 2))).toBeLessThan(4e-13)
      expect(relative(chiSquaredQuantileUpper(p, 2), -2 * Math.log(p))).toBeLessThan(4e-13)
      expect(relative(chiSquaredQuantileLower(p, 2), -2 * Math.log1p(-p))).toBeLessThan(4e-13)
      expect(relative(tUpperTail(x, 1), Math.atan2(1, x) / Math.PI)).toBeLessThan(4e-13)
      const root = 2 * p - 1
      expect(relative(tQuantileLower(p, 2), root / Math.sqrt(2 * p * (1 - p)))).toBeLessThan(4e-13)
    }
  })
})

// Degrees of freedom and shares on the scale of magnitudes; from 0.01 df and 1e-200 on, so that no answer leaves the doubles.
const dfs = fc.double({ min: -2, max: 9, noNaN: true }).map((power) => 10 ** power)
const shares = fc.double({ min: -200, max: Math.log10(0.5), noNaN: true }).map((power) => 10 ** power)
const points = fc.double({ min: -200, max: 200, noNaN: true }).map((power) => 10 ** power)

describe('as properties', () => {
  it('a tail at the quantile of a share is that share', () => {
    fc.assert(
      fc.property(shares, dfs, dfs, (p, df1, df2) => {
        const roundTrips = [
          [() => tQuantileUpper(p, df1), (x: number) => tUpperTail(x, df1)],
          [() => tQuantileLower(p, df1), (x: number) => tLowerTail(x, df1)],
          [() => chiSquaredQuantileUpper(p, df1), (x: number) => chiSquaredUpperTail(x, df1)],
          [() => chiSquaredQuantileLower(p, df1), (x: number) => chiSquaredLowerTail(x, df1)],
          [() => fQuantileUpper(p, df1, df2), (x: number) => fUpperTail(x, df1, df2)],
          [() => fQuantileLower(p, df1, df2), (x: number) => fLowerTail(x, df1, df2)],
        ] as const
        for (const [quantile, tail] of roundTrips) {
          const x = answer(quantile)
          // Rounding x to a double moves the tail of a million degrees of freedom a thousand times as far.
          const allowed = 1e-12 + 4e-16 * Math.max(df1, df2) ** 0.5 * -Math.log(p)
          if (x !== 'beyond' && Math.abs(x) > 1e-300) expect(relative(tail(x), p)).toBeLessThan(allowed)
        }
        expect(relative(normalLowerTail(normalQuantile(p)), p)).toBeLessThan(1e-12)
      }),
      { seed: 21, numRuns: 1500 },
    )
  })

  it('a lower tail rises and an upper one falls, save in the last digits', () => {
    fc.assert(
      fc.property(points, fc.double({ min: 1, max: 3, noNaN: true }), dfs, dfs, (x, factor, df1, df2) => {
        const pairs = [
          [(at: number) => tLowerTail(at, df1), (at: number) => tUpperTail(at, df1)],
          [(at: number) => chiSquaredLowerTail(at, df1), (at: number) => chiSquaredUpperTail(at, df1)],
          [(at: number) => fLowerTail(at, df1, df2), (at: number) => fUpperTail(at, df1, df2)],
        ] as const
        const slack = 1e-12 + 1e-15 * Math.max(df1, df2) ** 0.5
        for (const [lower, upper] of pairs) {
          expect(lower(x * factor)).toBeGreaterThanOrEqual(lower(x) * (1 - slack))
          expect(upper(x * factor)).toBeLessThanOrEqual(upper(x) * (1 + slack))
        }
      }),
      { seed: 22, numRuns: 1500 },
    )
  })

  it('a quantile falls as the share above it rises', () => {
    fc.assert(
      fc.property(shares, fc.double({ min: 0.1, max: 0.99, noNaN: true }), dfs, dfs, (p, part, df1, df2) => {
        for (const quantile of [
          (alpha: number) => tQuantileUpper(alpha, df1),
          (alpha: number) => chiSquaredQuantileUpper(alpha, df1),
          (alpha: number) => fQuantileUpper(alpha, df1, df2),
        ]) {
          const [nearer, further] = [answer(() => quantile(p)), answer(() => quantile(p * part))]
          if (nearer !== 'beyond' && further !== 'beyond') expect(further).toBeGreaterThanOrEqual(nearer)
        }
      }),
      { seed: 23, numRuns: 1500 },
    )
  })
})

/** 0 where both are alike to within the smallest doubles. */
function relative(one: number, other: number): number {
  return Math.abs(one - other) < 1e-307 ? 0 : Math.abs(one - other) / Math.abs(other)
}
