import { describe, expect, it } from 'vitest'
import { cellTable, summariseCells } from '@/lib/statistics/cells'
import {
  cochran,
  cochranCritical,
  generalisedCochran,
  generalisedCochranCritical,
} from '@/lib/statistics/cochran'
import { grubbsPair, grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { grubbsSingle, grubbsSingleCritical, type End } from '@/lib/statistics/grubbs-single'
import { mandelH, mandelHCritical, mandelK, mandelKCritical } from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'
import {
  betweenLaboratories,
  generalMeans,
  laboratoryFTest,
  repeatability,
  reproducibility,
} from '@/lib/statistics/one-way-precision'
import { spreadOfMeans } from '@/lib/statistics/spread-of-means'
import { readReference, type ReferenceMaterial } from './reference/read-reference'

// Expected values: R 4.2.2 and exact rational arithmetic; provenance in reference/README.md.
const sets = [
  'chem',
  'coop',
  'dyestuff',
  'dyestuff2',
  'e691_glucose',
  'iso2_coal',
  'looms',
  'pastes',
  'rail',
  'strd_sirstv',
  'strd_smls01',
  'syn_edge',
  'syn_homog',
  'syn_nested3',
  'syn_nested4',
  'syn_staggered',
  'syn_unbalanced',
]
const all: [string, ReferenceMaterial][] = sets.flatMap((set) =>
  readReference(set).map((entry): [string, ReferenceMaterial] => [`${set} ${entry.material}`, entry]),
)
const alphas = { '0.5pct': 0.005, '1pct': 0.01, '5pct': 0.05 } as const

const tolerance = 1e-9
function expectClose(got: number, wanted: number | string, relative = tolerance, what = ''): void {
  const number = Number(wanted)
  // A difference that cancels to nearly 0 has no relative accuracy: hence the small absolute allowance.
  const error = Math.abs(got - number)
  expect(error, `${what} got ${got}, expected ${wanted}`).toBeLessThanOrEqual(
    relative * Math.abs(number) + 1e-13,
  )
}

/** The expected file holds null where a quantity does not exist; ours then refuses. */
function expectSame(
  get: () => number,
  wanted: number | null | undefined,
  what: string,
  relative = tolerance,
): void {
  if (wanted === null || wanted === undefined) expect(get, what).toThrow(NotComputable)
  else expectClose(get(), wanted, relative, what)
}

const replicated = all.filter(([, { expected }]) => expected.precision !== null)

describe.each(all)('%s', (_, { cells, centred, expected }) => {
  const summaries = summariseCells(cellTable(cells))
  const { counts, mandel } = expected

  it('has the means, numbers and cells of the reference', () => {
    const means = generalMeans(summaries)
    expect([means.laboratories, means.results]).toEqual([counts.p, counts.N])
    expectClose(centred.restore(means.weighted), expected.weighted_general_mean, 1e-14)
    expectClose(centred.restore(means.unweighted), expected.mean_of_lab_means, 1e-14)
    for (const cell of summaries) {
      expectClose(centred.restore(cell.mean), expected.lab_means[cell.laboratory], 1e-13, cell.laboratory)
      if (cell.sd === undefined) expect(expected.lab_sds[cell.laboratory] ?? null).toBeNull()
      else expectClose(cell.sd, expected.lab_sds[cell.laboratory], tolerance, cell.laboratory)
    }
  })

  it("has Mandel's h and its critical values", () => {
    const ofCells = safely(() => mandelH(summaries))
    const h = new Map(summaries.map(({ laboratory }, index) => [laboratory, ofCells?.[index]]))
    for (const [laboratory, wanted] of Object.entries<number | null>(mandel.h)) {
      if (wanted === null) expect(h.get(laboratory)).toBeUndefined()
      else expectClose(h.get(laboratory) as number, wanted, tolerance, laboratory)
    }
    for (const [name, alpha] of Object.entries(alphas)) {
      expectSame(() => mandelHCritical(counts.p, alpha), mandel.h_critical?.[name], `h ${name}`)
    }
  })

  it("has Mandel's k, pooled, and its critical values", () => {
    const { cells: replicatedOnes = [], k = [], pooledDf = 0 } = safely(() => mandelK(summaries)) ?? {}
    expect(k.length).toBe(Object.values(mandel.k_pooled ?? {}).filter((one) => one !== null).length)
    for (const [index, { laboratory, df }] of replicatedOnes.entries()) {
      expectClose(k[index]!, mandel.k_pooled[laboratory], tolerance, laboratory)
      for (const [name, alpha] of Object.entries(alphas)) {
        expectClose(mandelKCritical({ df, pooledDf, alpha }), mandel.k_pooled_critical[laboratory][name])
      }
    }
  })

  it("has Cochran's test", () => {
    const wanted = expected.cochran
    if (wanted === null) return expect(() => cochran(summaries)).toThrow(NotComputable)

    const test = cochran(summaries)
    expect([test.cells, test.df + 1]).toEqual([wanted.p, wanted.n_used])
    // Where several are equal ours is the first of them, the reference program's whichever rounding favoured.
    expectTied([test.laboratory], [wanted.lab], expected.lab_sds)
    expectClose(test.statistic, wanted.C)
    expectClose(test.pValue, wanted.p_value_bonferroni)
    for (const [name, alpha] of Object.entries(alphas)) {
      expectClose(cochranCritical({ cells: test.cells, df: test.df, alpha }), wanted.crit[name])
    }
    expect(test.isBalanced).toBe(wanted.balanced)
    if (test.isBalanced) {
      const generalised = generalisedCochran(summaries)
      expect(generalised.laboratory).toBe(test.laboratory)
      expectClose(generalised.statistic, wanted.C)
      expectClose(generalised.pValue, wanted.p_value_bonferroni)
    }
  })

  it.each(['high', 'low'] as const)("has Grubbs' tests at the %s end", (end: End) => {
    const wanted = expected.grubbs_on_lab_means
    if (wanted === null) return expect(() => grubbsSingle(summaries, end)).toThrow(NotComputable)

    const single = grubbsSingle(summaries, end)
    expectTied([single.laboratory], [wanted[`lab_${end}`]], expected.lab_means)
    expectClose(single.statistic, wanted[`G_${end}`])
    expectClose(single.pValue, wanted[`p_two_sided_${end}`])
    for (const name of ['1pct', '5pct'] as const) {
      expectClose(grubbsSingleCritical(counts.p, alphas[name]), wanted.crit_iso[name])
    }
    if (wanted.double === null || wanted.double === undefined) {
      return expect(() => grubbsPair(summaries, end)).toThrow(NotComputable)
    }
    const pair = grubbsPair(summaries, end)
    expectTied(pair.laboratories, wanted.double[`labs_${end}`], expected.lab_means)
    expectClose(pair.statistic, wanted.double[`ratio_${end}`])
    for (const name of ['1pct', '5pct'] as const) {
      expectClose(grubbsPairCritical(counts.p, alphas[name]), wanted.double.crit_iso[name], 1e-7)
    }
  })

  it('centres h on the mean of the laboratory means, with their standard deviation', () => {
    if (!expected.sd_of_lab_means) return expect(() => spreadOfMeans(summaries)).toThrow(NotComputable)
    const spread = spreadOfMeans(summaries)
    expectClose(spread.sd, expected.sd_of_lab_means)
    expectClose(centred.restore(spread.mean), expected.mean_of_lab_means, 1e-14)
  })
})

describe.each(replicated)('%s, with replicates', (_, { cells, centred, expected }) => {
  const summaries = summariseCells(cellTable(cells))
  const { counts, precision } = expected

  it('has the analysis of variance and the precision of the reference', () => {
    const anova = expected.anova_oneway
    const between = betweenLaboratories(summaries)
    const within = repeatability(summaries)
    expect([between.df, within.df]).toEqual([anova.df_lab, anova.df_residual])
    expectClose(between.sumOfSquares, anova.ss_lab)
    expectClose(within.sumOfSquares, anova.ss_residual)
    expectClose(between.effectiveReplicates, anova.n0)
    expectClose(between.harmonicReplicates, anova.n_harmonic)
    expectClose(between.rawVariance, precision.sL2_raw)
    expectClose(between.variance, precision.sL2)
    expectClose(between.sd, precision.sL)
    expectClose(within.variance, precision.sr2)
    expectClose(reproducibility(summaries).sd, precision.sR)
    if (within.variance > 0) {
      expectClose(laboratoryFTest(summaries).f, anova.F)
      expectClose(laboratoryFTest(summaries).pValue, anova.p_value)
    } else {
      expect(() => laboratoryFTest(summaries)).toThrow(NotComputable)
    }
  })

  it('has the mean squares interval of the unweighted means', () => {
    const wanted = expected.ci95?.thomas_hultquist?.ms_lab
    if (wanted !== undefined && wanted !== null)
      expectClose(betweenLaboratories(summaries).meanSquareOfMeans, wanted)
    else expect(counts.p).toBeLessThan(5)
  })

  it('keeps 13 digits of exact rational arithmetic', () => {
    const exact = expected.exact_decimal
    const between = betweenLaboratories(summaries)
    const within = repeatability(summaries)
    expectClose(centred.restore(generalMeans(summaries).weighted), exact.weighted_general_mean, 1e-15)
    expectClose(between.sumOfSquares, exact.ss_lab, 1e-13)
    expectClose(within.sumOfSquares, exact.ss_residual, 1e-13)
    expectClose(between.rawVariance, exact.sL2_raw, 1e-13)
    expectClose(within.sd, exact.sr, 1e-13)
    expectClose(reproducibility(summaries).sd, exact.sR, 1e-13)
  })
})

describe.each(replicated)('%s, generalised Cochran', (_, { cells, expected }) => {
  const ks = Object.entries<number | null>(expected.mandel.k_pooled ?? {}).filter(
    (entry) => entry[1] !== null,
  )

  it('is the square of k in another scale, with the critical value of k at alpha over the number of cells', () => {
    const summaries = summariseCells(cellTable(cells))
    if (ks.length < 2) return expect(() => generalisedCochran(summaries)).toThrow(NotComputable)

    const { laboratory, statistic, df, pooledDf, cells: count } = generalisedCochran(summaries)
    const k = expected.mandel.k_pooled[laboratory] as number
    expectClose(statistic, (df * k * k) / pooledDf)
    for (const [name, alpha] of Object.entries(alphas)) {
      const critical = generalisedCochranCritical({ cells: count, df, pooledDf, alpha: count * alpha })
      expectClose(critical, (df * expected.mandel.k_pooled_critical[laboratory][name] ** 2) / pooledDf)
    }
  })
})

describe('chem, 24 single results', () => {
  const [{ cells, expected }] = readReference('chem') as [ReferenceMaterial]
  const summaries = summariseCells(cellTable(cells))

  it('has a reproducibility that rests on single results, and no repeatability', () => {
    const { basis, sd } = reproducibility(summaries)
    expect(basis).toBe('single results')
    expectClose(sd, expected.sd_of_lab_means)
    for (const get of [repeatability, betweenLaboratories, laboratoryFTest, mandelK, cochran]) {
      expect(() => get(summaries)).toThrow(NotComputable)
    }
  })
})

/** The same laboratories, or others whose figures are the same. */
function expectTied(
  got: readonly string[],
  wanted: readonly string[],
  figures: Record<string, number>,
): void {
  const sorted = (laboratories: readonly string[]) =>
    laboratories.map((laboratory) => figures[laboratory] as number).sort((a, b) => a - b)
  const ours = sorted(got)
  expect(ours.length).toBe(wanted.length)
  sorted(wanted).forEach((figure, index) => expectClose(ours[index] as number, figure, 1e-13))
}

function safely<T>(get: () => T): T | undefined {
  try {
    return get()
  } catch (error) {
    if (error instanceof NotComputable) return undefined
    throw error
  }
}
