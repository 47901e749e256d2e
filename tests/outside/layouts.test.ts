import { beforeAll, describe, expect, it } from 'vitest'
import type { MaterialAnalysis } from '@/lib/statistics'
import { drawStudies, type DrawnStudy } from '@/tests/outside/draw-study'
import { runOutside } from '@/tests/outside/run-outside'
import { analyseRows } from '@/tests/statistics/analyse-rows'

/*
 * The same studies by two hands: ours, and R with aov, lme4 and MASS, which run
 * here and now. The studies are drawn from fixed seeds.
 */
const studies = drawStudies()
const byStudy = new Map<string, Map<string, number>>()

beforeAll(async () => {
  const input = studies.flatMap(({ name, nesting, rows }) =>
    rows.map(({ laboratory, groups, text }) => {
      const labels = [laboratory, ...groups].map((_, depth, path) => path.slice(0, depth + 1).join('/'))
      const four = Array.from({ length: 4 }, (_, depth) => labels[depth] ?? '-')
      return [name.replaceAll(',', ';'), nesting.length + 1, ...four, text]
    }),
  )
  for (const { study, key, value } of await runOutside({ program: 'Rscript', script: 'layouts.R', input })) {
    const figures = byStudy.get(study!) ?? new Map<string, number>()
    byStudy.set(study!, figures)
    figures.set(key!, Number(value))
  }
}, 120_000)

describe.each(studies)('$name', (study) => {
  it('has the degrees of freedom, sums of squares and F of aov to 1e-10', () => {
    const { analysis, figure, sourceInR } = sides(study)
    const total = analysis.anova.rows.reduce((sum, { ss }) => sum + ss!, 0)
    for (const { source, df, ss } of analysis.anova.rows) {
      expect(df, source).toBe(figure(`df ${sourceInR(source)}`))
      expect(Math.abs(ss! - figure(`ss ${sourceInR(source)}`)), source).toBeLessThan(1e-10 * total)
    }
    for (const row of analysis.anova.rows.filter(({ denominator }) => denominator?.kind === 'exact')) {
      const below = Object.entries(row.denominator!.weights).find(([, weight]) => weight === 1)![0]
      const square = (source: string): number =>
        figure(`ss ${sourceInR(source)}`) / figure(`df ${sourceInR(source)}`)
      expect(row.f! / (square(row.source) / square(below)), row.source).toBeCloseTo(1, 8)
    }
  })

  it('has the means of R to 1e-13', () => {
    const { analysis, figure } = sides(study)
    expect(analysis.mean! / figure('mean')).toBeCloseTo(1, 13)
    expect(analysis.meanOfCellMeans! / figure('mean of means')).toBeCloseTo(1, 13)
  })

  it('has the optimum of lme4: components to 1e-6 of the whole, deviance to 1e-8', () => {
    const { analysis, figure, sourceInR } = sides(study)
    const { components, deviance, converged, mean } = analysis.reml
    expect(converged).toBe(true)
    const whole = components.reduce((sum, { variance }) => sum + variance!, 0)
    for (const { source, variance } of components) {
      const theirs = figure(`reml ${source === 'residual' ? 'Residual' : sourceInR(source)}`)
      expect(Math.abs(variance! - theirs), source).toBeLessThan(1e-6 * whole)
    }
    expect(Math.abs(deviance! - figure('deviance'))).toBeLessThan(1e-8 * Math.abs(deviance!))
    expect(mean! / figure('reml mean')).toBeCloseTo(1, 7)
  })

  it("has MASS's proposal 2 with the standard's rounded factor for Algorithm A, and nearly it with the exact one", () => {
    const { analysis, figure } = sides(study)
    const { mean, sd } = analysis.robust.algorithmA
    if (analysis.laboratories < 3) return expect(sd).toBeNull()
    expect(mean! / figure('huber mean')).toBeCloseTo(1, 9)
    expect(sd! / figure('huber sd')).toBeCloseTo(1, 9)
    expect(Math.abs(sd! / figure('huber exact sd') - 1)).toBeLessThan(1e-2)
  })
})

function sides({ name, nesting, rows }: DrawnStudy): {
  analysis: MaterialAnalysis
  figure: (key: string) => number
  sourceInR: (source: string) => string
} {
  const analysis = analyseRows(rows, { nesting }).materials[0]!
  const figures = byStudy.get(name.replaceAll(',', ';'))!
  const levels = ['laboratory', ...nesting]
  return {
    analysis,
    figure: (key) => {
      if (!figures.has(key))
        throw new Error(`R has no ${key} of ${name}, only ${[...figures.keys()].join(', ')}`)
      return figures.get(key)!
    },
    sourceInR: (source) => (source === 'residual' ? 'Residuals' : `f${levels.indexOf(source) + 1}`),
  }
}
