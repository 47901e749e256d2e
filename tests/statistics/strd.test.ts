import { describe, expect, it } from 'vitest'
import { cellTable, summariseCells } from '@/lib/statistics/cells'
import {
  betweenLaboratories,
  generalMeans,
  laboratoryFTest,
  repeatability,
} from '@/lib/statistics/one-way-precision'
import { cellsOf, readJson, readRows } from './reference/read-reference'

interface Certified {
  df_between: number
  ss_between: string
  ms_between: string
  f: number
  df_within: number
  ss_within: string
  ms_within: string
  r_squared: string
  residual_sd: string
}

// NIST Statistical Reference Datasets, analysis of variance: the files' certified values, 15 digits.
const certified = readJson('expected/strd_certified.json') as Record<string, Certified>

// SmLs01 to SmLs09: base 1, a million or a million million (three sets each) with 21, 201 or 2001 results a treatment. The
// certified sums of squares follow from the rule below; the within mean square is 0.01 and F grows with the size.
const generated = [
  { name: 'smls01', base: 1n, size: 21 },
  { name: 'smls02', base: 1n, size: 201 },
  { name: 'smls03', base: 1n, size: 2001 },
  { name: 'smls04', base: 10n ** 6n, size: 21 },
  { name: 'smls05', base: 10n ** 6n, size: 201 },
  { name: 'smls06', base: 10n ** 6n, size: 2001 },
  { name: 'smls07', base: 10n ** 12n, size: 21 },
  { name: 'smls08', base: 10n ** 12n, size: 201 },
  { name: 'smls09', base: 10n ** 12n, size: 2001 },
]

/** Number of digits in which two figures agree. */
function agreedDigits(got: number, wanted: number): number {
  return got === wanted ? 16 : -Math.log10(Math.abs(got - wanted) / Math.abs(wanted))
}

/** Centres .4 .3 .5 .3 .5 .3 .5 .3 .5 above the base, each once, then 0.1 below and above it in turn. */
function generate({ base, size }: { base: bigint; size: number }) {
  const tenths = [4n, 3n, 5n, 3n, 5n, 3n, 5n, 3n, 5n]
  return tenths.flatMap((centre, treatment) =>
    Array.from({ length: size }, (_, index) => {
      const value = 10n * base + centre + (index === 0 ? 0n : index % 2 === 1 ? -1n : 1n)
      return { lab: `T${treatment + 1}`, value: `${value / 10n}.${value % 10n}` }
    }),
  )
}

function analyse(rows: readonly { lab: string; value: string }[]) {
  const { centred, cells } = cellsOf(rows)
  const summaries = summariseCells(cellTable(cells))
  const between = betweenLaboratories(summaries)
  const within = repeatability(summaries)
  const { f } = laboratoryFTest(summaries)
  const mean = centred.restore(generalMeans(summaries).weighted)
  return { between, within, f, mean }
}

describe.each(['sirstv', 'atmwtag', 'smls01', 'smls04', 'smls07'])('StRD %s', (name) => {
  it('agrees with every certified value in 13 digits', () => {
    const { between, within, f } = analyse(readRows(`strd_${name}`))
    const wanted = certified[name] as Certified
    expect([between.df, within.df]).toEqual([wanted.df_between, wanted.df_within])
    const figures: [string, number, string | number][] = [
      ['between sum of squares', between.sumOfSquares, wanted.ss_between],
      ['between mean square', between.meanSquare, wanted.ms_between],
      ['within sum of squares', within.sumOfSquares, wanted.ss_within],
      ['within mean square', within.variance, wanted.ms_within],
      ['F', f, wanted.f],
      ['R squared', between.sumOfSquares / (between.sumOfSquares + within.sumOfSquares), wanted.r_squared],
      ['residual standard deviation', within.sd, wanted.residual_sd],
    ]
    for (const [what, got, number] of figures) {
      expect(agreedDigits(got, Number(number)), `${what}: ${got}`).toBeGreaterThan(13)
    }
  })
})

describe.each(generated)('StRD $name, $size results a treatment about $base', ({ name, base, size }) => {
  it('has its exact sums of squares in 13 digits, whatever the offset', () => {
    const { between, within, f, mean } = analyse(generate({ base, size }))
    // Centres 0.4, four of 0.3 and four of 0.5 about 0.4: 8 × 0.01 a result; size - 1 deviations of 0.1 a treatment.
    const between2 = (8 * size) / 100
    const within2 = (9 * (size - 1)) / 100
    expect(agreedDigits(between.sumOfSquares, between2)).toBeGreaterThan(13)
    expect(agreedDigits(within.sumOfSquares, within2)).toBeGreaterThan(13)
    expect(agreedDigits(f, between2 / 8 / 0.01)).toBeGreaterThan(13)
    expect(agreedDigits(within.sd, 0.1)).toBeGreaterThan(13)
    expect(mean).toBe(Number(`${base}.4`))
    if (certified[name])
      expect(agreedDigits(between2, Number(certified[name].ss_between))).toBeGreaterThan(14)
  })
})

describe('the rule that generates the SmLs sets', () => {
  it.each(['smls01', 'smls04', 'smls07'])('gives the file of %s', (name) => {
    const of = generated.find((set) => set.name === name) as (typeof generated)[number]
    const sorted = (rows: readonly { lab: string; value: string }[]) =>
      rows.map((row) => `${row.lab} ${Number(row.value)}`).sort()
    expect(sorted(generate(of))).toEqual(sorted(readRows(`strd_${name}`)))
  })
})
