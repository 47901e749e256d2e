import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import tCdf from '@stdlib/stats-base-dists-t-cdf'
import tQuantile from '@stdlib/stats-base-dists-t-quantile'
import jstat from 'jstat'
import { describe, expect, it } from 'vitest'
import {
  chiSquaredLowerTail,
  chiSquaredQuantileLower,
  chiSquaredQuantileUpper,
  chiSquaredUpperTail,
} from '@/lib/statistics/distributions/chi-squared'
import { fLowerTail, fQuantileLower, fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { normalLowerTail, normalQuantile, normalUpperTail } from '@/lib/statistics/distributions/normal'
import { studentizedRangeUpperTail } from '@/lib/statistics/distributions/studentized-range'
import {
  tLowerTail,
  tQuantileLower,
  tQuantileUpper,
  tUpperTail,
} from '@/lib/statistics/distributions/students-t'

interface Row {
  x: number
  df: number
  df1: number
  df2: number
  lower: string
  upper: string
}

const reference = join(import.meta.dirname, '../reference/tables')
// mpmath 1.3.0 in 60 digits, made by distributions.py beside the file.
const golden = JSON.parse(readFileSync(join(reference, 'distributions.json'), 'utf8')) as {
  chi_squared: Row[]
  f: Row[]
  t: Row[]
  normal: Row[]
  studentized_range: { q: number; means: number; df: number; upper: number }[]
}
// Handbook tables as printed; provenance in the folder's README.
const printed = JSON.parse(readFileSync(join(reference, 't_f_chi2.json'), 'utf8')) as Record<
  't' | 'F' | 'chi2',
  { prob: number; df: number; df1: number; df2: number; published: number; decimals: number }[]
>

/** Largest relative error over the rows. */
function worst<T>(rows: readonly T[], pair: (row: T) => readonly [number, number]): number {
  expect(rows.length).toBeGreaterThan(5)
  return Math.max(
    ...rows.map((row) => {
      const [got, wanted] = pair(row)
      return Math.abs(got - wanted) / Math.abs(wanted)
    }),
  )
}

const smallLower = <T extends Row>(rows: readonly T[]) => rows.filter((row) => Number(row.lower) <= 0.6)
const smallUpper = <T extends Row>(rows: readonly T[]) => rows.filter((row) => Number(row.upper) <= 0.6)

describe('chi-squared', () => {
  const rows = golden.chi_squared

  it('gives both tails to 1e-11 from 1 to a million degrees of freedom, down to 1e-12', () => {
    expect(worst(rows, (row) => [chiSquaredLowerTail(row.x, row.df), Number(row.lower)])).toBeLessThan(1e-11)
    expect(worst(rows, (row) => [chiSquaredUpperTail(row.x, row.df), Number(row.upper)])).toBeLessThan(1e-11)
  })

  it('gives back the point from either tail to 1e-11', () => {
    const lower = smallLower(rows)
    const upper = smallUpper(rows)
    expect(worst(lower, (row) => [chiSquaredQuantileLower(Number(row.lower), row.df), row.x])).toBeLessThan(
      1e-11,
    )
    expect(worst(upper, (row) => [chiSquaredQuantileUpper(Number(row.upper), row.df), row.x])).toBeLessThan(
      1e-11,
    )
  })

  it('agrees with the handbook table to its printed digits', () => {
    for (const row of printed.chi2) {
      expect(chiSquaredQuantileLower(row.prob, row.df).toFixed(row.decimals)).toBe(
        row.published.toFixed(row.decimals),
      )
    }
  })

  it('is seconded by jstat to the nine digits that jstat keeps at small degrees of freedom', () => {
    for (const df of [1, 3, 9, 40])
      expect(chiSquaredQuantileLower(0.95, df)).toBeCloseTo(jstat.chisquare.inv(0.95, df), 7)
  })
})

describe('F', () => {
  const rows = golden.f

  it('gives both tails to 1e-11, down to 1e-12 and at one degree of freedom', () => {
    expect(worst(rows, (row) => [fLowerTail(row.x, row.df1, row.df2), Number(row.lower)])).toBeLessThan(1e-11)
    expect(worst(rows, (row) => [fUpperTail(row.x, row.df1, row.df2), Number(row.upper)])).toBeLessThan(1e-11)
  })

  it('gives back the point from either tail to 1e-11', () => {
    const lower = smallLower(rows)
    const upper = smallUpper(rows)
    expect(worst(lower, (row) => [fQuantileLower(Number(row.lower), row.df1, row.df2), row.x])).toBeLessThan(
      1e-11,
    )
    expect(worst(upper, (row) => [fQuantileUpper(Number(row.upper), row.df1, row.df2), row.x])).toBeLessThan(
      1e-11,
    )
  })

  it('agrees with the handbook table to its printed digits', () => {
    for (const row of printed.F) {
      expect(fQuantileLower(row.prob, row.df1, row.df2).toFixed(row.decimals)).toBe(
        row.published.toFixed(row.decimals),
      )
    }
  })

  it('has the closed forms on 1,1 and 2,n degrees of freedom', () => {
    // F on (1,1) is the square of a Cauchy variable: the upper point of a small share a is 4/(πa)² to first order.
    expect(fQuantileUpper(1e-12, 1, 1) / (4 / (Math.PI * 1e-12) ** 2)).toBeCloseTo(1, 11)
    // P(F > x) on (2, n) is (1 + 2x/n)^(-n/2).
    expect(fUpperTail(30, 2, 14) / (1 + 60 / 14) ** -7).toBeCloseTo(1, 12)
  })
})

describe("Student's t", () => {
  it('gives both tails and the points back to 1e-11', () => {
    const rows = golden.t
    expect(worst(rows, (row) => [tUpperTail(row.x, row.df), Number(row.upper)])).toBeLessThan(1e-11)
    expect(worst(rows, (row) => [tLowerTail(-row.x, row.df), Number(row.upper)])).toBeLessThan(1e-11)
    expect(worst(rows, (row) => [tQuantileUpper(Number(row.upper), row.df), row.x])).toBeLessThan(1e-11)
    expect(worst(rows, (row) => [tQuantileLower(Number(row.upper), row.df), -row.x])).toBeLessThan(1e-11)
  })

  it('agrees with the handbook table to its printed digits', () => {
    for (const row of printed.t) {
      expect(tQuantileLower(row.prob, row.df).toFixed(row.decimals)).toBe(row.published.toFixed(row.decimals))
    }
  })
})

describe("Student's t beside stdlib", () => {
  it('is seconded at the levels and degrees of freedom that studies bring', () => {
    for (const df of [1, 2, 4.7, 9, 60, 2000]) {
      for (const alpha of [0.4, 0.05, 0.005, 1e-4, 1e-8]) {
        const t = tQuantileUpper(alpha, df)
        expect(t / -tQuantile(alpha, df)).toBeCloseTo(1, 12)
        expect(tUpperTail(t, df) / tCdf(-t, df)).toBeCloseTo(1, 12)
      }
    }
  })
})

describe('normal', () => {
  it('gives both tails and the points back to 1e-13', () => {
    const rows = golden.normal
    expect(worst(rows, (row) => [normalUpperTail(row.x), Number(row.upper)])).toBeLessThan(1e-13)
    expect(worst(rows, (row) => [normalLowerTail(-row.x), Number(row.upper)])).toBeLessThan(1e-13)
    expect(worst(rows, (row) => [normalQuantile(Number(row.upper)), -row.x])).toBeLessThan(1e-13)
  })
})

describe('studentised range', () => {
  it('gives the upper tail of scipy 1.17.1 to 1e-9', () => {
    const rows = golden.studentized_range
    const error = Math.max(
      ...rows.map((row) => Math.abs(studentizedRangeUpperTail(row.q, row.means, row.df) - row.upper)),
    )
    expect(error).toBeLessThan(1e-9)
  })

  it('is the t distribution in another dress when there are two means', () => {
    for (const [q, df] of [
      [0.5, 1],
      [3, 4],
      [12, 9],
    ] as const) {
      const wanted = 2 * tUpperTail(q / Math.SQRT2, df)
      expect(Math.abs(studentizedRangeUpperTail(q, 2, df) / wanted - 1)).toBeLessThan(1e-10)
    }
  })
})

describe('every distribution', () => {
  it('refuses a probability outside 0 to 1 and degrees of freedom that are none', () => {
    for (const p of [0, 1, -0.1, 1.1, NaN]) {
      for (const quantile of [
        () => normalQuantile(p),
        () => tQuantileLower(p, 3),
        () => tQuantileUpper(p, 3),
        () => chiSquaredQuantileLower(p, 3),
        () => chiSquaredQuantileUpper(p, 3),
        () => fQuantileLower(p, 3, 3),
        () => fQuantileUpper(p, 3, 3),
      ]) {
        expect(quantile).toThrow(RangeError)
      }
    }
    for (const df of [0, -1, NaN, Infinity]) {
      expect(() => tUpperTail(1, df)).toThrow(RangeError)
      expect(() => chiSquaredUpperTail(1, df)).toThrow(RangeError)
      expect(() => fUpperTail(1, 2, df)).toThrow(RangeError)
      expect(() => studentizedRangeUpperTail(1, 3, df)).toThrow(RangeError)
    }
  })

  it('has tails of 0 and 1 at the ends of its range', () => {
    expect([chiSquaredLowerTail(0, 3), chiSquaredUpperTail(Infinity, 3)]).toEqual([0, 0])
    expect([fUpperTail(0, 3, 4), fUpperTail(Infinity, 3, 4)]).toEqual([1, 0])
    expect([tUpperTail(Infinity, 3), tUpperTail(-Infinity, 3)]).toEqual([0, 1])
    expect([studentizedRangeUpperTail(0, 3, 4), studentizedRangeUpperTail(Infinity, 3, 4)]).toEqual([1, 0])
  })
})
