import { describe, expect, it } from 'vitest'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { cochranCritical } from '@/lib/statistics/cochran'
import { grubbsPairLowerTail } from '@/lib/statistics/distributions/grubbs-pair-ratio'
import { grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { grubbsSingleCritical } from '@/lib/statistics/grubbs-single'
import { mandelHCritical, mandelKCritical } from '@/lib/statistics/mandel'
import { readJson } from './reference/read-reference'

/** Of the published values: those that the reference's independent computation does not round to. */
interface Compared {
  n_compared: number
  not_equal: { p: number; n?: number; stat?: string; level: string }[]
}

interface CochranRow {
  p: number
  n: number
  c_1pct: number
  c_5pct: number
  published_1pct: number | null
  published_5pct: number | null
}

interface SingleRow {
  p: number
  iso_1pct: number
  iso_5pct: number
  exact_one_sided_1pct: number
  exact_one_sided_5pct: number
  published_iso_1pct: number | null
  published_iso_5pct: number | null
}

interface DoubleRow extends SingleRow {
  one_sided_1pct: number
  one_sided_5pct: number
}

// Recomputed and published critical values; sources in each file and in reference/README.md.
const cochranTable = readJson('tables/cochran.json') as { rows: CochranRow[]; compare: Compared }
const mandelTable = readJson('tables/mandel.json') as {
  h: ({ p: number } & Record<string, number>)[]
  k: ({ p: number; n: number } & Record<string, number>)[]
}
const grubbsTable = readJson('tables/grubbs.json') as {
  single: SingleRow[]
  double: DoubleRow[]
  compare_single: Compared
  compare_double: Compared
  simulation_check_double: { n: number; nominal: number; simulated: number; standard_error: number }[]
}

const levels = [
  { name: '1pct', shown: '1%', alpha: 0.01 },
  { name: '5pct', shown: '5%', alpha: 0.05 },
] as const

function expectRelative(got: number, wanted: number, relative: number): void {
  expect(Math.abs(got / wanted - 1), `got ${got}, expected ${wanted}`).toBeLessThan(relative)
}

describe("Mandel's critical values", () => {
  it.each(['0_5pct', '1pct', '5pct'])('of h agree with the recomputed table at %s', (name) => {
    const alpha = { '0_5pct': 0.005, '1pct': 0.01, '5pct': 0.05 }[name] as number
    expect(mandelTable.h.length).toBeGreaterThan(20)
    for (const row of mandelTable.h)
      expectRelative(mandelHCritical(row.p, alpha), row[`h_${name}`] as number, 1e-12)
  })

  it.each(['0_5pct', '1pct', '5pct'])('of k agree with the recomputed table at %s', (name) => {
    const alpha = { '0_5pct': 0.005, '1pct': 0.01, '5pct': 0.05 }[name] as number
    expect(mandelTable.k.length).toBeGreaterThan(100)
    for (const { p, n, ...row } of mandelTable.k) {
      const got = mandelKCritical({ df: n - 1, pooledDf: p * (n - 1), alpha })
      expectRelative(got, row[`k_${name}`] as number, 1e-12)
    }
  })

  // ASTM E691, table 5 (0.5 %) and ISO 5725-2:1994, table 7 (5 %), from memory, to the printed two decimals.
  it('agree with printed entries of E691 and ISO 5725-2', () => {
    expect(mandelHCritical(8, 0.005).toFixed(2)).toBe('2.15')
    expect(mandelKCritical({ df: 2, pooledDf: 16, alpha: 0.005 }).toFixed(2)).toBe('2.06')
    expect(mandelHCritical(8, 0.05).toFixed(2)).toBe('1.75')
    expect(mandelKCritical({ df: 2, pooledDf: 16, alpha: 0.05 }).toFixed(2)).toBe('1.67')
  })
})

describe("Cochran's critical values", () => {
  it.each(levels)('agree with the recomputed table at $shown', ({ name, alpha }) => {
    expect(cochranTable.rows.length).toBeGreaterThan(100)
    for (const row of cochranTable.rows) {
      expectRelative(cochranCritical({ cells: row.p, df: row.n - 1, alpha }), row[`c_${name}`], 1e-12)
    }
  })

  it.each(levels)(
    'agree with ISO 5725-2, table 4, to its printed digits at $shown',
    ({ name, shown, alpha }) => {
      let compared = 0
      for (const row of cochranTable.rows) {
        const published = row[`published_${name}`]
        if (published === null || isListed(cochranTable.compare, { p: row.p, n: row.n, level: shown }))
          continue
        const got = cochranCritical({ cells: row.p, df: row.n - 1, alpha })
        expect(Math.abs(got - published), `p ${row.p}, n ${row.n}`).toBeLessThanOrEqual(0.0005 + 1e-9)
        compared += 1
      }
      expect(compared).toBeGreaterThan(80)
    },
  )
})

describe("Grubbs' critical values", () => {
  it.each(levels)('of the single test agree with the recomputed table at $shown', ({ name, alpha }) => {
    for (const row of grubbsTable.single) {
      expectRelative(grubbsSingleCritical(row.p, alpha), row[`iso_${name}`], 1e-12)
    }
  })

  it.each(levels)(
    'of the single test agree with ISO 5725-2, table 5, at $shown',
    ({ name, shown, alpha }) => {
      const got = (p: number) => grubbsSingleCritical(p, alpha)
      const compared = comparePublished({ name, shown, got, unit: 0.001, ...tableOf('single') })
      expect(compared).toBeGreaterThan(20)
    },
  )

  it.each(levels)('of the pair test agree with the recomputed exact table at $shown', ({ name, alpha }) => {
    for (const row of grubbsTable.double) {
      expectRelative(grubbsPairCritical(row.p, alpha), row[`iso_${name}`], 1e-7)
      // A test at twice the level has the one-sided value.
      expectRelative(grubbsPairCritical(row.p, 2 * alpha), row[`one_sided_${name}`], 1e-7)
    }
  })

  it.each(levels)('of the pair test agree with ISO 5725-2, table 5, at $shown', ({ name, shown, alpha }) => {
    const got = (p: number) => grubbsPairCritical(p, alpha)
    const compared = comparePublished({ name, shown, got, unit: 0.0001, ...tableOf('double') })
    expect(compared).toBeGreaterThan(20)
  })

  it('of the pair test hold in simulation', () => {
    for (const { n, nominal, simulated, standard_error } of grubbsTable.simulation_check_double) {
      const row = grubbsTable.double.find(({ p }) => p === n) as DoubleRow
      const key = { 0.005: 'iso_1pct', 0.025: 'iso_5pct', 0.01: 'one_sided_1pct', 0.05: 'one_sided_5pct' }[
        nominal
      ]
      const critical = row[key as 'iso_1pct']
      expect(Math.abs(grubbsPairLowerTail(critical, n) - simulated)).toBeLessThan(4.5 * standard_error)
    }
  })
})

describe('the exact distribution of the pair ratio', () => {
  it.each([4, 5, 6, 7, 8, 12, 20, 30, 60, 100])('of %d values adds up to 1', (count) => {
    // Every sample has some ratio: the last break of the distribution is its largest possible value.
    expect(grubbsPairLowerTail(1 - 1e-12, count)).toBeCloseTo(1, 10)
  })

  it('has the closed form of four values in its far tail', () => {
    // The two others are always √(1/2) of their spread apart from their mean. For c near 0 the pair may stand anywhere
    // between β and π/2, tan β = √(1/2), and the share of ratios below c is 6 pairs × √c × that angle/π.
    const c = 1e-14
    const leading = (6 * Math.sqrt(c) * (Math.PI / 2 - Math.atan(Math.SQRT1_2))) / Math.PI
    expectRelative(grubbsPairLowerTail(c, 4), leading, 1e-6)
  })

  it('falls with every further value for the same ratio', () => {
    for (let count = 4; count < 40; count++) {
      expect(grubbsPairLowerTail(0.2, count + 1)).toBeLessThan(grubbsPairLowerTail(0.2, count))
    }
  })
})

function tableOf(kind: 'single' | 'double'): { rows: readonly SingleRow[]; compare: Compared } {
  return kind === 'single'
    ? { rows: grubbsTable.single, compare: grubbsTable.compare_single }
    : { rows: grubbsTable.double, compare: grubbsTable.compare_double }
}

interface PublishedOf {
  name: '1pct' | '5pct'
  shown: string
  got: (p: number) => number
  /** The last printed digit. */
  unit: number
  rows: readonly SingleRow[]
  compare: Compared
}

/** Holds each published value against ours, except those listed as not agreeing; returns how many were held. */
function comparePublished({ name, shown, got, unit, rows, compare }: PublishedOf): number {
  let compared = 0
  for (const row of rows) {
    const published = row[`published_iso_${name}`]
    if (published === null || published === undefined || isListed(compare, { p: row.p, level: shown }))
      continue
    expect(Math.abs(got(row.p) - published), `p ${row.p}`).toBeLessThanOrEqual(unit / 2 + 1e-9)
    compared += 1
  }
  return compared
}

function isListed(
  { not_equal }: Compared,
  { p, n, level }: { p: number; n?: number; level: string },
): boolean {
  return not_equal.some((entry) => entry.p === p && entry.n === n && entry.level === level)
}

// Common practice, with no source: beyond some fifteen degrees of freedom the 97.5 % point of t is 2 for practical purposes.
describe('the rule of thumb that t is 2', () => {
  it('is within 0.14 of the truth from fifteen degrees of freedom on, nearest at sixty, and 0.04 too high at the end', () => {
    const distance = (df: number): number => tQuantileUpper(0.025, df) - 2
    expect(distance(15)).toBeCloseTo(0.1314, 4)
    expect(distance(16)).toBeCloseTo(0.1199, 4)
    expect(distance(30)).toBeCloseTo(0.0423, 4)
    expect(distance(60)).toBeCloseTo(0.0003, 4)
    expect(distance(1e9)).toBeCloseTo(-0.04, 4)
    for (let df = 15; df < 2000; df += 1) expect(Math.abs(distance(df))).toBeLessThan(0.14)
  })
})
