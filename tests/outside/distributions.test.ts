import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, it } from 'vitest'
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
import { DEBIANS_PYTHON, type OutsideProgram, runOutside } from '@/tests/outside/run-outside'

/*
 * Every tail and quantile of ours beside R's, over a wide grid. Where the two
 * part by more than 1e-10, arbitrary precision decides; the points at which R
 * is the one that errs are listed in `points-where-r-errs.csv`, so that a new
 * one is noticed.
 */
type Side = 'lower' | 'upper'
type Point = { what: string; side: Side; at: number; df1: number; df2: number; ours: number }

const TOLERANCE = 1e-10
const SIDES: readonly Side[] = ['lower', 'upper']
const SHARES = [0.5, 0.3, 0.1, 0.05, 0.025, 0.01, 0.005, 1e-3, 1e-4, 1e-6, 1e-8, 1e-10, 1e-12]
const DFS = [1, 2, 3, 4.7, 8, 15, 30, 60, 120, 500, 1e3, 1e4, 1e5, 1e6]
const DFS_OF_F = [1, 2, 3, 7.5, 20, 100, 5000, 1e6]

type Family = { name: string; dfs: readonly (readonly [number, number])[]; quantile: Of; tail: Of }
type Of = (side: Side, at: number, df1: number, df2: number) => number

const alone = DFS.map((df) => [df, 0] as const)
const families: readonly Family[] = [
  {
    name: 'norm',
    dfs: [[0, 0]],
    quantile: (side, p) => (side === 'lower' ? normalQuantile(p) : -normalQuantile(p)),
    tail: (side, z) => (side === 'lower' ? normalLowerTail(z) : normalUpperTail(z)),
  },
  {
    name: 't',
    dfs: alone,
    quantile: (side, p, df) => (side === 'lower' ? tQuantileLower(p, df) : tQuantileUpper(p, df)),
    tail: (side, t, df) => (side === 'lower' ? tLowerTail(t, df) : tUpperTail(t, df)),
  },
  {
    name: 'chisq',
    dfs: alone,
    quantile: (side, p, df) =>
      side === 'lower' ? chiSquaredQuantileLower(p, df) : chiSquaredQuantileUpper(p, df),
    tail: (side, x, df) => (side === 'lower' ? chiSquaredLowerTail(x, df) : chiSquaredUpperTail(x, df)),
  },
  {
    name: 'f',
    dfs: DFS_OF_F.flatMap((df1) => DFS_OF_F.map((df2) => [df1, df2] as const)),
    quantile: (side, p, df1, df2) =>
      side === 'lower' ? fQuantileLower(p, df1, df2) : fQuantileUpper(p, df1, df2),
    tail: (side, x, df1, df2) => (side === 'lower' ? fLowerTail(x, df1, df2) : fUpperTail(x, df1, df2)),
  },
]

/** Quantiles at each share, and the tails at those quantiles, rounded so that both hands read the same number. */
const points = families.flatMap(({ name, dfs, quantile, tail }) =>
  dfs.flatMap(([df1, df2]) =>
    SIDES.flatMap((side) =>
      SHARES.flatMap((share): Point[] => {
        const x = quantile(side, share, df1, df2)
        // The middle of a symmetrical distribution has no relative error.
        if (x === 0) return []
        const at = Number(x.toPrecision(6))
        return [
          { what: `q${name}`, side, at: share, df1, df2, ours: x },
          { what: `p${name}`, side, at, df1, df2, ours: tail(side, at, df1, df2) },
        ]
      }),
    ),
  ),
)

const row = ({ what, side, at, df1, df2 }: Point) => [what, side, at, df1, df2]

let apart: { point: Point; r: number; exact: number }[] = []

beforeAll(async () => {
  const theirs = await valuesFrom('Rscript', 'distributions.R', points.map(row))
  const differing = points
    .map((point, index) => ({ point, r: theirs[index]! }))
    .filter(({ point, r }) => !(relative(point.ours, r) <= TOLERANCE))
  const decided = await valuesFrom(
    DEBIANS_PYTHON,
    'arbiter.py',
    differing.map(({ point }) => [...row(point), point.ours]),
  )
  apart = differing.map((one, index) => ({ ...one, exact: decided[index]! }))
}, 170_000)

describe('tails and quantiles from 1 to a million degrees of freedom, down to 1e-12', () => {
  it('are looked at in thousands of points', () => {
    expect(points.length).toBeGreaterThan(4000)
  })

  it('are those of R to 1e-10, or right where R is not', () => {
    const wrong = apart.filter(({ point, exact }) => !(relative(point.ours, exact) <= TOLERANCE))
    expect(wrong).toEqual([])
  })

  it('part from R at the listed points alone', () => {
    const listed = readFileSync(join(import.meta.dirname, 'points-where-r-errs.csv'), 'utf8').split('\n')
    const found = apart.map(({ point, r, exact }) => [...row(point), magnitude(relative(r, exact))].join(','))
    expect(found.filter((line) => !listed.includes(line)).join('\n')).toBe('')
  })
})

describe('the studentised range', () => {
  const ranges = [2, 3, 5, 8, 12, 30].flatMap((means) =>
    [2, 5, 16, 40, 120].flatMap((df) => [1, 2.5, 3.5, 4.5, 6].map((q) => ({ means, df, q }))),
  )

  const aside = { means: 2, df: 2 }

  it('is that of R to six decimals', async () => {
    const input = ranges.map(({ means, df, q }) => ['ptukey', 'upper', q, means, df])
    const theirs = await valuesFrom('Rscript', 'distributions.R', input)
    for (const [index, { means, df, q }] of ranges.entries()) {
      if (means === aside.means && df === aside.df) continue
      const gap = Math.abs(studentizedRangeUpperTail(q, means, df) - theirs[index]!)
      expect(gap, `${means} means, ${df} df, ${q}`).toBeLessThan(1e-6)
    }
  })

  it("is that of R's own t at two means and two df, where R's range keeps four decimals", async () => {
    const points = [1, 2.5, 3.5, 4.5, 6]
    const ofT = points.map((q) => ['pt', 'upper', q / Math.SQRT2, aside.df, 0])
    const theirs = await valuesFrom('Rscript', 'distributions.R', ofT)
    for (const [index, q] of points.entries()) {
      const ours = studentizedRangeUpperTail(q, aside.means, aside.df)
      expect(ours / (2 * theirs[index]!)).toBeCloseTo(1, 11)
    }
  })
})

async function valuesFrom(
  program: OutsideProgram,
  script: string,
  input: (string | number)[][],
): Promise<number[]> {
  if (input.length === 0) return []
  return (await runOutside({ program, script, input })).map(({ value }) => Number(value))
}

function relative(one: number, other: number): number {
  return one === other ? 0 : Math.abs(one - other) / Math.abs(other)
}

/** The power of ten of an error: its digits differ between processors. */
function magnitude(error: number): string {
  return Number.isFinite(error) ? `1e${Math.floor(Math.log10(error))}` : 'no number'
}
