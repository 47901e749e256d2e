import { describe, expect, it } from 'vitest'
import type { AnalysisDocument, MaterialAnalysis } from '@/lib/statistics'
import { analyseRows } from './analyse-rows'
import { readJson, readRows } from './reference/read-reference'

// Expected values: R 4.2.2 with lme4, and exact rational arithmetic; provenance in reference/README.md.
const ONE_WAY = [
  'chem',
  'coop',
  'dyestuff',
  'dyestuff2',
  'e691_glucose',
  'iso2_coal',
  'looms',
  'pastes',
  'rail',
  'syn_edge',
  'syn_homog',
  'syn_nested3',
  'syn_nested4',
  'syn_staggered',
  'syn_unbalanced',
]
const NESTED: Record<string, string[]> = {
  coop: ['batch'],
  pastes: ['batch'],
  syn_nested3: ['day'],
  syn_nested4: ['operator', 'day'],
  syn_staggered: ['day'],
}

/* eslint-disable-next-line @typescript-eslint/no-explicit-any -- a hundred keys, read once each */
type Expected = any

function analyseSet(set: string, nesting: readonly string[] = [], homogeneity = false): AnalysisDocument {
  const rows = readRows(set).map((row) => ({
    laboratory: row.lab,
    material: row.material,
    groups: nesting.map((level) => row[level]!),
    text: row.value,
  }))
  return analyseRows(rows, { nesting, settings: { homogeneity } })
}

function entries(set: string): Expected[] {
  return (readJson(`expected/${set}.json`) as { materials: Expected[] }).materials
}

function materialOf(document: AnalysisDocument, name: string): MaterialAnalysis {
  return document.materials.find(({ material }) => material === name)!
}

/** `null` in the expected file is a figure that does not exist. Beside 0 a relative tolerance means nothing, so the scale of the figure is given. */
function expectClose(
  got: number | null,
  wanted: number | null,
  what: string,
  relative = 1e-9,
  scale = 0,
): void {
  if (wanted === null) {
    expect(got, what).toBeNull()
    return
  }
  expect(got, what).not.toBeNull()
  const allowed = relative * Math.max(Math.abs(wanted), scale)
  expect(Math.abs(got! - wanted), `${what}: got ${got}, expected ${wanted}`).toBeLessThanOrEqual(allowed)
}

function expectRoot(got: number | null, variance: number | null, what: string, relative = 1e-9): void {
  expectClose(got, variance === null ? null : Math.sqrt(Math.max(0, variance)), what, relative)
}

describe.each(ONE_WAY)('analyse on %s as a one-way layout', (set) => {
  const document = analyseSet(set)

  it.each(entries(set).map((entry) => [entry.material, entry] as const))(
    'reproduces means, precision and the analysis of variance of %s',
    (name, wanted) => {
      const got = materialOf(document, name)
      expectClose(got.mean, wanted.weighted_general_mean, 'mean')
      expectClose(got.meanOfCellMeans, wanted.mean_of_lab_means, 'mean of cell means')
      const { precision, anova_oneway: table } = wanted
      if (precision === null) return
      const scale = precision.sR2
      expectClose(got.repeatability.variance, precision.sr2, 's_r²', 1e-9, scale)
      expectClose(got.betweenLaboratory.varianceRaw, precision.sL2_raw, 's_L² raw', 1e-9, scale)
      expectClose(got.betweenLaboratory.variance, precision.sL2, 's_L²', 1e-9, scale)
      expectClose(got.reproducibility.variance, precision.sR2, 's_R²')
      expectClose(got.repeatability.limit, precision.r_limit_2_8, 'r', 1e-9, precision.sR)
      expectClose(got.reproducibility.limit, precision.R_limit_2_8, 'R')
      expectClose(got.nBar, table.n0, 'n̄')
      expectClose(got.nHarmonic, table.n_harmonic, 'n_h')
      const [laboratory, residual] = got.anova.rows
      expectClose(laboratory!.ss, table.ss_lab, 'SS', 1e-9, scale)
      expectClose(residual!.ss, table.ss_residual, 'SS within', 1e-9, scale)
      if (precision.sr2 > 0) {
        expectClose(laboratory!.f, table.F, 'F')
        expectClose(laboratory!.pValue, table.p_value, 'p of F')
        expectClose(got.equality.f, table.F, 'F of equality')
      }
    },
  )

  it.each(entries(set).map((entry) => [entry.material, entry] as const))(
    'reproduces the intervals of %s',
    (name, wanted) => {
      const got = materialOf(document, name)
      const limits = wanted.ci95
      if (limits?.thomas_hultquist == null || wanted.precision.sr2 === 0) return
      expectClose(got.repeatability.ci95.lower, limits.sr.lower, 's_r lower')
      expectClose(got.repeatability.ci95.upper, limits.sr.upper, 's_r upper')
      const { sL2, sR2 } = limits.thomas_hultquist
      if (!got.betweenLaboratory.ci95.extended) {
        expectRoot(got.betweenLaboratory.ci95.lower, sL2.mls.lower, 's_L lower')
        expectRoot(got.betweenLaboratory.ci95.upper, sL2.mls.upper, 's_L upper')
      }
      if (!got.reproducibility.ci95.extended) {
        expectRoot(got.reproducibility.ci95.lower, sR2.mls_graybill_wang.lower, 's_R lower')
        expectRoot(got.reproducibility.ci95.upper, sR2.mls_graybill_wang.upper, 's_R upper')
      }
      expectClose(got.reproducibility.satterthwaite95.df, sR2.satterthwaite.df, 'df')
      expectRoot(got.reproducibility.satterthwaite95.lower, sR2.satterthwaite.lower, 'Satterthwaite lower')
      expectRoot(got.reproducibility.satterthwaite95.upper, sR2.satterthwaite.upper, 'Satterthwaite upper')
      if (sL2.satterthwaite != null && sL2.satterthwaite.df > 0.1) {
        expectClose(got.betweenLaboratory.satterthwaite95.df, sL2.satterthwaite.df, 'df of s_L', 1e-7)
        expectRoot(got.betweenLaboratory.satterthwaite95.lower, sL2.satterthwaite.lower, 's_L lower', 1e-7)
        expectRoot(got.betweenLaboratory.satterthwaite95.upper, sL2.satterthwaite.upper, 's_L upper', 1e-7)
      }
    },
  )

  it.each(entries(set).map((entry) => [entry.material, entry] as const))(
    'reproduces h, k, Cochran and Grubbs of %s, each in its place of the document',
    (name, wanted) => {
      const got = materialOf(document, name)
      const cells = new Map(got.cells.map((cell) => [cell.laboratory, cell]))
      for (const [laboratory, h] of Object.entries<number | null>(wanted.mandel?.h ?? {})) {
        expectClose(cells.get(laboratory)!.h, h, `h of ${laboratory}`, 1e-9, 1)
      }
      for (const [laboratory, k] of Object.entries<number | null>(wanted.mandel?.k_pooled ?? {})) {
        expectClose(cells.get(laboratory)!.k, k, `k of ${laboratory}`, 1e-9, 1e-3)
      }
      for (const [laboratory, critical] of Object.entries<Expected>(wanted.mandel?.k_pooled_critical ?? {})) {
        expectClose(
          cells.get(laboratory)!.kCritical['0.01'],
          critical?.['1pct'] ?? null,
          `critical k of ${laboratory}`,
        )
      }
      if (wanted.mandel?.h_critical != null) {
        expectClose(got.critical.h['0.005'], wanted.mandel.h_critical['0.5pct'], 'critical h')
      }
      if (wanted.cochran?.C != null) {
        expectClose(got.cochran.statistic, wanted.cochran.C, 'C')
        expect(got.cochran.laboratory).toBe(wanted.cochran.lab)
        expect(got.cochran.nUsed).toBe(wanted.cochran.n_used)
        expectClose(got.cochran.critical['0.05'], wanted.cochran.crit['5pct'], 'critical C')
        expectClose(got.cochran.pValue, wanted.cochran.p_value_bonferroni, 'p of C')
      }
      const grubbs = wanted.grubbs_on_lab_means
      if (grubbs?.crit_iso != null) {
        expectClose(got.grubbs.high.statistic, grubbs.G_high, 'G high')
        expect(got.grubbs.high.laboratories).toEqual([grubbs.lab_high])
        expectClose(got.grubbs.low.pValue, grubbs.p_two_sided_low, 'p of G low')
      }
      if (grubbs?.double?.crit_iso != null) {
        expectClose(got.grubbs.pairLow.statistic, grubbs.double.ratio_low, 'pair low')
        expectClose(
          got.grubbs.pairHigh.critical['0.01'],
          grubbs.double.crit_iso['1pct'],
          'critical pair',
          1e-7,
        )
      }
    },
  )

  it.each(entries(set).map((entry) => [entry.material, entry] as const))(
    'reproduces the robust estimates and REML of %s',
    (name, wanted) => {
      const got = materialOf(document, name)
      const a = wanted.robust?.algorithm_a_on_lab_means
      if (a?.sd !== undefined) {
        expectClose(got.robust.algorithmA.mean, a.mean, 'x*')
        expectClose(got.robust.algorithmA.sd, a.sd, 's*')
      } else {
        expect(got.robust.algorithmA.sd).toBeNull()
        expect(got.robust.algorithmA.reasons?.['sd']).toBeTruthy()
      }
      const s = wanted.robust?.algorithm_s_exact_constants
      if (s?.sd !== undefined) {
        expectClose(got.robust.algorithmS.sd, s.sd, 'w')
        expect(got.robust.algorithmS.generalised).toBe(false)
      }
      const reml = wanted.reml_oneway
      if (reml == null) return
      const scale = reml.sR2
      const [laboratory, residual] = got.reml.components
      expect(got.reml.converged).toBe(true)
      expectClose(laboratory!.variance, reml.sL2, 'REML s_L²', 1e-6, scale)
      expectClose(residual!.variance, reml.sr2, 'REML s_r²', 1e-6)
      expectClose(got.reml.deviance, reml.reml_deviance, 'deviance', 1e-8)
      expectClose(got.reml.mean, reml.mean, 'REML mean')
      expectClose(got.reml.meanStandardError, reml.se_mean, 'REML standard error', 1e-6)
      expect(got.reml.boundary).toEqual(reml.boundary ? ['laboratory'] : [])
    },
  )
})

describe.each(Object.entries(NESTED))('analyse on %s as a nested layout', (set, nesting) => {
  const document = analyseSet(set, nesting)
  const cases = entries(set).map((entry) => [entry.material, entry.nested] as const)

  it.each(cases)('reproduces the table and the components of %s', (name, wanted) => {
    const got = materialOf(document, name)
    for (const stratum of wanted.table) {
      const source = ours(stratum.source)
      const row = got.anova.rows.find((one) => one.source === source)!
      expect(row.df).toBe(stratum.df)
      expectClose(row.ss, stratum.ss, `SS of ${source}`)
      expectClose(row.ms, stratum.ms, `MS of ${source}`)
      for (const [component, coefficient] of Object.entries<number>(stratum.ems)) {
        expectClose(row.ems[ours(component.replace('var_', ''))]!, coefficient, `EMS of ${source}`)
      }
      if (stratum.test === null) continue
      expectClose(row.f, stratum.test.F, `F of ${source}`)
      expectClose(row.pValue, stratum.test.p_value, `p of ${source}`)
      expectClose(row.denominator!.ms, stratum.test.denominator, `denominator of ${source}`)
      expectClose(row.denominator!.df, stratum.test.df2, `denominator df of ${source}`)
    }
    for (const component of got.anova.components) {
      const raw = wanted.components_anova_raw[theirs(component.source)]
      expectClose(component.varianceRaw, raw, component.source, 1e-9, wanted.sR2)
      expect(component.variance).toBe(Math.max(0, component.varianceRaw!))
    }
    expectClose(got.repeatability.variance, wanted.sr2, 's_r²')
    expectClose(got.reproducibility.variance, wanted.sR2, 's_R²')
    expectClose(got.mean, wanted.grand_mean, 'mean')
  })

  it.each(cases)('reproduces the intermediate precisions and the intervals of %s', (name, wanted) => {
    const got = materialOf(document, name)
    expect(got.intermediate).toHaveLength(nesting.length)
    for (const one of got.intermediate) {
      const key = `from_${one.varies[0]}_down`
      expectClose(one.variance, wanted.sI2_intermediate[key], key)
      expectRoot(one.satterthwaite95.lower, wanted.ci95[key].satterthwaite.lower, key)
      expectRoot(one.satterthwaite95.upper, wanted.ci95[key].satterthwaite.upper, key)
      const gw = wanted.ci95[key].graybill_wang
      if (gw != null && !one.ci95.extended) {
        expectRoot(one.ci95.lower, gw.lower, key)
        expectRoot(one.ci95.upper, gw.upper, key)
      }
    }
    expectClose(got.repeatability.ci95.lower, wanted.ci95.sr.lower, 's_r lower')
    expectClose(got.reproducibility.satterthwaite95.df, wanted.ci95.sR2.satterthwaite.df, 's_R df')
    const gw = wanted.ci95.sR2.graybill_wang
    if (gw != null && !got.reproducibility.ci95.extended) {
      expectRoot(got.reproducibility.ci95.lower, gw.lower, 's_R lower')
      expectRoot(got.reproducibility.ci95.upper, gw.upper, 's_R upper')
    }
    const laboratory = wanted.ci95.components_mls_balanced_only.lab
    if (laboratory != null && !got.betweenLaboratory.ci95.extended) {
      expectRoot(got.betweenLaboratory.ci95.lower, laboratory.mls.lower, 's_L lower')
      expectRoot(got.betweenLaboratory.ci95.upper, laboratory.mls.upper, 's_L upper')
    }
  })

  it.each(cases)('reproduces REML of %s', (name, wanted) => {
    const { reml } = materialOf(document, name)
    expect(reml.converged).toBe(true)
    for (const { source, variance } of reml.components) {
      expectClose(variance, wanted.reml.components[theirs(source)], source, 1e-6, wanted.reml.sR2 * 1e-6)
    }
    expectClose(reml.deviance, wanted.reml.reml_deviance, 'deviance', 1e-8)
    expectClose(reml.meanStandardError, wanted.reml.se_mean, 'standard error', 1e-6)
  })
})

describe.each(['coop', 'e691_glucose', 'iso2_coal', 'syn_homog', 'syn_nested3', 'syn_unbalanced'])(
  'analyse on %s over its materials',
  (set) => {
    const document = analyseSet(set)
    const wanted = readJson(`expected/${set}.json`) as Expected

    it('reproduces the three forms of the level relation', () => {
      if (wanted.functional_relation === undefined) return
      for (const [key, relation] of [
        ['sr', document.levelRelation!.repeatability],
        ['sR', document.levelRelation!.reproducibility],
      ] as const) {
        const { I_through_origin: one, II_linear: two, III_power: three } = wanted.functional_relation[key]
        expectClose(relation.proportional.b, one.slope_mean_ratio, `${key} proportional`)
        if (two !== null) {
          expectClose(relation.linear.a, two.successive_fits[2].intercept, `${key} intercept`, 1e-8)
          expectClose(relation.linear.b, two.successive_fits[2].slope, `${key} slope`, 1e-8)
          expectClose(relation.linearConverged.a, two.converged.intercept, `${key} settled intercept`, 1e-8)
          expectClose(relation.linearConverged.b, two.converged.slope, `${key} settled slope`, 1e-8)
        }
        if (three !== null) {
          expectClose(relation.power.c, three.log10_c, `${key} c`)
          expectClose(relation.power.d, three.d, `${key} d`)
        }
      }
    })

    it('reproduces the two-sample plots', () => {
      expect(document.youden).toHaveLength(wanted.youden.length)
      wanted.youden.forEach((plot: Expected, index: number) => {
        const got = document.youden![index]!
        expect([got.x, got.y, got.laboratories]).toEqual([plot.x, plot.y, plot.p])
        expectClose(got.mean[0], plot.mean_x, 'mean')
        expectClose(got.sd[1], plot.sd_y, 'sd')
        expectClose(got.covariance, plot.covariance, 'covariance', 1e-9, got.sd[0]! * got.sd[1]!)
        expectClose(got.correlation, plot.correlation, 'correlation', 1e-9, 1)
        expectClose(got.factor, plot.factor_hotelling_prediction_95, 'factor')
        expectClose(got.semiAxes[0], plot.semi_axes_hotelling_prediction[0], 'major')
        expectClose(got.semiAxes[1], plot.semi_axes_hotelling_prediction[1], 'minor')
        expectClose(got.angle, plot.major_axis_angle_rad, 'angle')
        for (const point of got.points) {
          expectClose(point.distance2, plot.distance2[point.laboratory], `d² of ${point.laboratory}`)
        }
      })
    })
  },
)

describe('analyse on certified data', () => {
  // NIST StRD, one-way analysis of variance. The last one stands on a common part of 10¹², on
  // which a reader of doubles keeps four digits.
  it.each(['sirstv', 'smls01', 'smls04', 'smls07'])('gives %s to thirteen digits', (name) => {
    const certified = (readJson('expected/strd_certified.json') as Record<string, Expected>)[name]
    const [laboratory, residual] = analyseSet(`strd_${name}`).materials[0]!.anova.rows
    expectClose(laboratory!.ss, Number(certified.ss_between), 'SS between', 1e-13)
    expectClose(residual!.ss, Number(certified.ss_within), 'SS within', 1e-13)
    expectClose(laboratory!.f, Number(certified.f), 'F', 1e-13)
  })
})

describe('analyse on units before shipping', () => {
  const document = analyseSet('syn_homog', [], true)

  it.each(entries('syn_homog').map((entry) => [entry.material, entry.homogeneity] as const))(
    'reproduces the check of %s',
    (name, wanted) => {
      const got = document.homogeneity!.find(({ material }) => material === name)!
      expect(got.units).toBe(wanted.g)
      expectClose(got.sx, wanted.sx, 's_x')
      expectClose(got.sw, wanted.sw, 's_w')
      expectClose(got.ssSquaredRaw, wanted.ss2_raw, 's_s²', 1e-9, wanted.sx ** 2)
      expectClose(got.ss, wanted.ss, 's_s')
      expectClose(got.f1, wanted.F1, 'F1')
      expectClose(got.f2, wanted.F2, 'F2')
      expectClose(got.fPValue, wanted.p_value, 'p')
      expect(got.basic).toBeNull()
      expect(got.reasons?.['basic']).toBe('No target standard deviation was given.')
    },
  )
})

// Values computed in R on exact integers for the Q method and Hampel's estimate.
describe('Q method and Hampel in the document', () => {
  it.each([
    ['chem', 'chem', 0.636010957663195, 3.14676425283259, 0.636010957663195, null],
    ['e691_glucose', 'A', 0.358761688667587, 41.5188888888889, 0.987519287363359, 0.880620789306326],
    ['e691_glucose', 'B', 1.10587365888256, 79.6517348316653, 1.75312412812821, 1.39955804014755],
    ['e691_glucose', 'C', 2.3190059669544, 134.72625, 2.63603550262423, 1.93422066222639],
    ['e691_glucose', 'D', 3.34720956952749, 194.717083333333, 3.7769838811066, 2.993062325559],
    ['e691_glucose', 'E', 3.73555985107488, 294.492083333333, 3.35830529185741, 2.23824450615358],
    ['iso2_coal', '1', 0.0314378799347886, 0.6896875, undefined, undefined],
    ['iso2_coal', '2', 0.0601018292870958, 1.25037896341866, undefined, undefined],
    ['iso2_coal', '3', 0.0476191416659298, 1.66802083333333, undefined, undefined],
    ['iso2_coal', '4', 0.0606566154035921, 3.24909308425315, undefined, undefined],
  ] as const)('%s %s', (set, name, q, hampel, between, within) => {
    const { robust } = materialOf(analyseSet(set), name)
    expectClose(robust.qHampel.sd, q, 'Q', 1e-12)
    expectClose(robust.qHampel.mean, hampel, 'Hampel', 1e-12)
    if (between !== undefined) expectClose(robust.qMethod.reproducibility.sd, between, 'Q between', 1e-12)
    if (within !== undefined) expectClose(robust.qMethod.repeatability.sd, within, 'Q within', 1e-12)
  })
})

function ours(source: string): string {
  return source === 'lab' ? 'laboratory' : source
}

function theirs(source: string): string {
  return source === 'laboratory' ? 'lab' : source
}
