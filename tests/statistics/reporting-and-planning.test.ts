import { describe, expect, it } from 'vitest'
import { combinationInterval } from '@/lib/statistics/combination-interval'
import { chiSquaredQuantileLower, chiSquaredQuantileUpper } from '@/lib/statistics/distributions/chi-squared'
import { fQuantileLower, fQuantileUpper } from '@/lib/statistics/distributions/f'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { homogeneityFigures, homogeneityVerdict } from '@/lib/statistics/homogeneity'
import { proposedForm } from '@/lib/statistics/level-relation'
import { biasPrecision, repeatabilityPrecision, reproducibilityPrecision } from '@/lib/statistics/planning'
import { lastPlace, roundedPrecision } from '@/lib/statistics/rounding'
import { ownPValue, predictionFactor } from '@/lib/statistics/two-sample-plot'
import { analyseRows, rowsOf } from './analyse-rows'

describe('rounding for a report', () => {
  // The examples of the convention: one digit more below a leading 1, and a carry keeps the place.
  it.each([
    [0.0996, '0.100'],
    [9.96, '10.0'],
    [1.996, '2.00'],
    [2.98, '3.0'],
    [0.25, '0.25'],
    [1234, '1230'],
  ])('prints a standard deviation of %d as %s', (sd, text) => {
    const rounded = roundedPrecision({
      mean: 5,
      repeatabilitySd: sd,
      betweenLaboratorySd: null,
      intermediateSds: [],
      reproducibilitySd: null,
      repeatabilityLimit: null,
      reproducibilityLimit: null,
    })
    expect(rounded.repeatability()).toBe(text)
  })

  it('gives the standard deviations and the mean the finer place, and the limits theirs', () => {
    const one = analyseRows(rowsOf({ A: '41.03 41.45', B: '41.17 42.00', C: '40.20 40.80', D: '42.1 42.2' }))
      .materials[0]!
    const { mean, repeatability, reproducibility } = one.rounded
    const places = [mean, repeatability, reproducibility].map((text) => text!.split('.')[1]!.length)
    expect(new Set(places).size).toBe(1)
    const place = Math.min(lastPlace(one.repeatability.sd!), lastPlace(one.reproducibility.sd!))
    expect(places[0]).toBe(-place)
  })

  it('has no place to round to when nothing scatters', () => {
    const one = analyseRows(rowsOf({ A: '7.5 7.5', B: '7.5 7.5' })).materials[0]!
    expect(one.rounded.mean).toBeNull()
    expect(one.rounded.reasons!['mean']).toContain('No standard deviation above 0')
  })
})

describe('planning', () => {
  // ISO 5725-1, 6.3, formulas 9, 10 and 16; p = 8, n = 2, γ = 2 worked by hand:
  // A_r = 1.96/√16; A_R = 1.96 √((8·7² + 7)/(2·16·4·7·8)); A = 1.96 √(7/64).
  it('gives the half-widths of the standard', () => {
    const plan = { p: 8, n: 2, gamma: 2 }
    expect(repeatabilityPrecision(plan)).toBeCloseTo(1.96 / 4, 14)
    expect(reproducibilityPrecision(plan)).toBeCloseTo(1.96 * Math.sqrt(399 / 7168), 14)
    expect(biasPrecision(plan)).toBeCloseTo(1.96 * Math.sqrt(7 / 64), 14)
  })

  it('refuses a plan that is none', () => {
    expect(() => repeatabilityPrecision({ p: 8, n: 1, gamma: 2 })).toThrow(RangeError)
    expect(() => reproducibilityPrecision({ p: 1, n: 2, gamma: 2 })).toThrow(RangeError)
    expect(() => biasPrecision({ p: 8, n: 2, gamma: 0.5 })).toThrow(RangeError)
  })
})

describe('the interval of a combination of mean squares', () => {
  it('is the exact chi-squared interval for one mean square', () => {
    const { lower, upper } = combinationInterval([{ weight: 2, ms: 3, df: 7 }])
    expect(lower).toBeCloseTo((7 * 6) / chiSquaredQuantileUpper(0.025, 7), 12)
    expect(upper).toBeCloseTo((7 * 6) / chiSquaredQuantileLower(0.025, 7), 12)
  })

  it('touches 0 exactly where the F test is at its critical value', () => {
    const difference = (ratio: number) =>
      combinationInterval([
        { weight: 0.5, ms: ratio, df: 5 },
        { weight: -0.5, ms: 1, df: 12 },
      ])
    expect(difference(fQuantileUpper(0.025, 5, 12)).lower).toBeCloseTo(0, 10)
    expect(difference(fQuantileLower(0.025, 5, 12)).upper).toBeCloseTo(0, 10)
  })
})

describe('trueness', () => {
  it('weighs the uncertainty of the mean against that of the reference', () => {
    const rows = rowsOf({ A: '10.1 10.3', B: '10.6 10.4', C: '9.9 10.1', D: '10.8 11.0' })
    const one = analyseRows(rows, { settings: { references: { M: { value: '10', uncertainty: 0.1 } } } })
      .materials[0]!
    // Balanced: ISO 5725-4 has u_δ² = (s_R² − (1 − 1/n) s_r²)/p.
    const u2 = (one.reproducibility.variance! - 0.5 * one.repeatability.variance!) / 4
    const df = (3 * (u2 + 0.01) ** 2) / u2 ** 2
    const half = tQuantileUpper(0.025, df) * Math.sqrt(u2 + 0.01)
    expect(one.trueness!.bias).toBeCloseTo(0.4, 12)
    expect(one.trueness!.standardUncertainty).toBeCloseTo(Math.sqrt(u2), 12)
    expect(one.trueness!.df).toBeCloseTo(df, 9)
    expect(one.trueness!.ci95.upper).toBeCloseTo(0.4 + half, 10)
    expect(one.cells[0]!.bias).toBeCloseTo(0.2, 12)
    expect(one.cells[0]!.scores.z).toBeCloseTo(
      0.2 / Math.sqrt(one.betweenLaboratory.variance! + one.repeatability.variance! / 2),
      12,
    )
  })

  it('uses a stated uncertainty against a reference, and not against a small consensus', () => {
    const rows = rowsOf({ A: '10.1 10.3', B: '10.6 10.4', C: '9.9 10.1' }).map((row) => ({
      ...row,
      uncertainty: 0.3,
    }))
    const against = { settings: { references: { M: { value: '10', uncertainty: 0.4 } } } }
    const { scores } = analyseRows(rows, against).materials[0]!.cells[0]!
    expect(scores.zeta).toBeCloseTo(0.2 / 0.5, 12)
    expect(scores.en).toBeCloseTo(0.2 / 1, 12)
    const alone = analyseRows(rows).materials[0]!.cells[0]!.scores
    expect(alone.zeta).toBeNull()
    expect(alone.reasons!['zeta']).toContain('fewer than 12 laboratories')
  })
})

describe('the two-sample plot', () => {
  it('has an ellipse for a further laboratory that none of up to eleven plotted ones can leave', () => {
    // d² is at most (p − 1)²/p.
    for (let p = 4; p <= 11; p += 1) expect(predictionFactor(p)).toBeGreaterThan((p - 1) ** 2 / p)
    expect(predictionFactor(12)).toBeLessThan(121 / 12)
  })

  it('gives the plotted laboratories a p-value of their own, 0 at the bound and 1 at the centre', () => {
    expect(ownPValue(0, 8)).toBe(1)
    expect(ownPValue(49 / 8, 8)).toBe(0)
    // (1 − d² p/(p − 1)²)^((p − 3)/2) at p = 5: 1 − 5 d²/16.
    expect(ownPValue(1.6, 5)).toBeCloseTo(0.5, 14)
  })
})

describe('homogeneity', () => {
  it('judges by both criteria and by the precision of the check', () => {
    // Unit means 10, 10.4, 9.6; portions ± 0.1: s_x = 0.4, s_w² = 3 × 0.02/3.
    const figures = homogeneityFigures([
      [9.9, 10.1],
      [10.3, 10.5],
      [9.5, 9.7],
    ])
    expect(figures.sx).toBeCloseTo(0.4, 12)
    expect(figures.sw ** 2).toBeCloseTo(0.02, 12)
    expect(figures.ssSquaredRaw).toBeCloseTo(0.16 - 0.01, 12)
    // 0.3σ against s_s = 0.387: met from σ = 1.2910.
    expect(homogeneityVerdict(figures, 1.292).basic).toBe(true)
    expect(homogeneityVerdict(figures, 1.29)).toMatchObject({ basic: false, expanded: true })
    expect(homogeneityVerdict(figures, 0.28).checkPrecise).toBe(false)
  })
})

describe('the proposed form of the level relation', () => {
  it('is the best, and the simplest of those within a tenth of it', () => {
    expect(proposedForm({ proportional: 1.05, linear: 1, power: 0.99 })).toBe('proportional')
    expect(proposedForm({ proportional: 2, linear: 1.05, power: 1 })).toBe('linear')
    expect(proposedForm({ proportional: 2, linear: 2, power: 1 })).toBe('power')
    expect(proposedForm({ proportional: null, linear: null, power: null })).toBeNull()
  })
})

describe('are the laboratories alike', () => {
  it('measures the range of averages by the curve it draws', () => {
    const one = analyseRows(rowsOf({ A: '1.0 1.2', B: '1.1 1.5', C: '1.9 2.1' })).materials[0]!
    const { reference, range, rangePValue, df, pValue } = one.equality
    expect(df).toEqual([2, 3])
    expect(reference.scale).toBeCloseTo(one.repeatability.sd! / Math.SQRT2, 14)
    expect(reference.halfWidth95).toBeCloseTo(tQuantileUpper(0.025, 3) * reference.scale!, 14)
    expect(range).toBeCloseTo((2.0 - 1.1) / reference.scale!, 12)
    expect(rangePValue).toBeGreaterThan(0)
    expect(rangePValue).toBeLessThan(0.1)
    expect(pValue).toBeLessThan(0.1)
  })
})
