import { describe, expect, it } from 'vitest'
import type { AnalysisDocument } from '@/lib/statistics'
import { analyseRows, type TestRow } from './analyse-rows'

/** One laboratory a line; its days are parted by semicolons, their results by spaces. */
function nested(laboratories: Readonly<Record<string, string>>): AnalysisDocument {
  const rows = Object.entries(laboratories).flatMap(([laboratory, days]) =>
    days.split(';').flatMap((results, day) =>
      results
        .trim()
        .split(' ')
        .map((text): TestRow => ({ laboratory, text, groups: [String(day + 1)] })),
    ),
  )
  return analyseRows(rows, { nesting: ['day'] })
}

const BALANCED = {
  A: '10.1 10.4; 11.0 11.2',
  B: '12.0 12.3; 13.1 12.9',
  C: '9.0 9.1; 10.2 10.0',
  D: '11.4 11.1; 12.5 12.2',
}

const UNEVEN = { ...BALANCED, D: '11.4 11.1 11.2; 12.5', E: '10.8 11.0; 11.9 11.6; 12.4 12.2' }

describe('the standard deviation a laboratory is scored by in a nested layout', () => {
  it('holds the days: s_L² + s_day²/2 + s_r²/4 for two days of two', () => {
    const { anova, assigned, cells } = nested(BALANCED).materials[0]!
    const [laboratory, day, residual] = anova.components.map(({ variance }) => variance)
    expect(day).toBeGreaterThan(0.1)
    const sigma = Math.sqrt(laboratory! + day! / 2 + residual! / 4)
    expect(assigned.sigma).toBeCloseTo(sigma, 12)
    const { mean, scores } = cells[1]!
    expect(scores.z).toBeCloseTo((mean! - assigned.value!) / sigma, 12)
  })

  it('weighs the days of each laboratory by their own sizes', () => {
    const { anova, assigned, cells } = nested(UNEVEN).materials[0]!
    const [laboratory, day, residual] = anova.components.map(({ variance }) => variance)
    // D has days of 3 and 1 of its 4 results, E three days of 2 of its 6.
    const ofD = Math.sqrt(laboratory! + (day! * (9 + 1)) / 16 + residual! / 4)
    const ofE = Math.sqrt(laboratory! + (day! * (4 + 4 + 4)) / 36 + residual! / 6)
    expect(cells[3]!.scores.z).toBeCloseTo((cells[3]!.mean! - assigned.value!) / ofD, 12)
    expect(cells[4]!.scores.z).toBeCloseTo((cells[4]!.mean! - assigned.value!) / ofE, 12)
    expect(assigned.sigma).toBeNull()
    expect(assigned.reasons?.['sigma']).toContain('its own cell')
  })
})

describe('robust figures of a nested layout', () => {
  it('have no reproducibility, because cell means mix the laboratories with their days', () => {
    const { robust } = nested(BALANCED).materials[0]!
    expect(robust.algorithmA.sd).not.toBeNull()
    expect(robust.algorithmS.sd).not.toBeNull()
    expect(robust.reproducibility.sd).toBeNull()
    expect(robust.reproducibility.reasons?.['sd']).toContain('nested')
    expect(robust.reproducibility.betweenLaboratory.sd).toBeNull()
    expect(robust.reproducibility.betweenLaboratory.reasons?.['sd']).toContain('nested')
  })

  it('take Q repeatability from pairs of one day, so that a shift of a day leaves it where it was', () => {
    const shifted = { ...BALANCED, A: '10.1 10.4; 51.0 51.2', C: '9.0 9.1; 0.2 0.0' }
    const { repeatability, reproducibility } = nested(BALANCED).materials[0]!.robust.qMethod
    const moved = nested(shifted).materials[0]!.robust.qMethod
    expect(moved.repeatability.sd).toBe(repeatability.sd)
    // By hand: differences .1, .2 three times and .3 four times in 8 days; H = 1/8, 4/8, 1 and G = 1/16, 5/16, 3/4,
    // so that G = 1/2 lies 3/7 of the way from 0.2 to 0.3; divided by √2 Φ⁻¹(0.75), Φ⁻¹(0.75) from memory.
    expect(repeatability.sd).toBeCloseTo((0.2 + 0.3 / 7) / (Math.SQRT2 * 0.6744897501960817), 12)
    expect(moved.reproducibility.sd).toBeGreaterThan(reproducibility.sd!)
  })

  it('give no Q repeatability and no k where the day cannot be told from the replicate, for that reason', () => {
    const { robust, repeatability, cells, cochran, critical } = nested({
      A: '10.1; 11.0',
      B: '12.0; 13.1',
      C: '9.0; 10.2',
      D: '11.4; 12.5',
    }).materials[0]!
    const words = repeatability.reasons?.['variance']
    expect(words).toContain('No day holds two results')
    expect(robust.qMethod.repeatability.sd).toBeNull()
    expect(robust.qMethod.repeatability.reasons?.['sd']).toBe(words)
    expect(robust.algorithmS.reasons?.['sd']).toBe(words)
    expect(cells.map(({ reasons }) => reasons?.['k'])).toEqual(Array(4).fill(words))
    expect(cells.map(({ reasons }) => reasons?.['sd'])).toEqual(Array(4).fill(words))
    expect(cells[0]!.generalisedCochran.reasons?.['statistic']).toBe(words)
    expect(cochran.reasons?.['statistic']).toBe(words)
    expect(critical.kByDf).toEqual({})
  })

  it('of one laboratory alone say that it is one laboratory', () => {
    const { betweenLaboratory, reproducibility, equality, repeatability } = nested({
      A: '10.1 10.4; 11.0 11.2',
    }).materials[0]!
    expect(repeatability.sd).toBeGreaterThan(0)
    for (const { reasons } of [betweenLaboratory, reproducibility]) {
      expect(reasons?.['variance']).toBe('2 laboratories with results are needed; there is 1.')
    }
    expect(equality.reasons?.['f']).toBe('2 laboratories with results are needed; there is 1.')
  })
})
