import type { MaterialAnalysis, TwoSamplePlot } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { required, withReasons } from '@/lib/statistics/document/attempt'
import { median } from '@/lib/statistics/median'
import {
  correlation,
  ellipse,
  ownPValue,
  type PlotPoint,
  plotSpread,
  predictionFactor,
  squaredDistance,
} from '@/lib/statistics/two-sample-plot'

/** A material as a two-sample plot sees it: cell means as deviations, and the way back. */
export type PlottedMaterial = {
  material: MaterialAnalysis['material']
  summaries: readonly CellSummary[]
  restore: (deviation: number) => number
}

/**
 * The two-sample plot of a pair of materials over the laboratories that have both: points, medians, ellipse, and each
 * point's own p-value. Lengths are in the unit of the results, restored from deviations.
 *
 * What too few laboratories do not give is `null`. Source: Youden 1959; `two-sample-plot.ts`.
 */
export function twoSampleBlock(x: PlottedMaterial, y: PlottedMaterial): TwoSamplePlot {
  const onY = new Map(y.summaries.map(({ laboratory, mean }) => [laboratory, mean]))
  const common = x.summaries
    .filter(({ laboratory }) => onY.has(laboratory))
    .map(({ laboratory, mean }) => ({ laboratory, x: mean, y: onY.get(laboratory)! }))

  return withReasons((attempt) => {
    const spread = attempt('covariance', () => plotSpread(common))
    const factor = attempt('factor', () => predictionFactor(common.length))
    const shape = attempt('angle', () => ellipse(required(spread, TOO_FEW), required(factor, TOO_FEW)))
    const medians = common.length === 0 ? null : medianPoint(common)
    return {
      x: x.material,
      y: y.material,
      laboratories: common.length,
      mean: [restored(x, spread?.mean[0]), restored(y, spread?.mean[1])],
      median: [restored(x, medians?.x), restored(y, medians?.y)],
      sd: [spread?.sd[0] ?? null, spread?.sd[1] ?? null],
      covariance: spread?.covariance ?? null,
      correlation: attempt('correlation', () => correlation(required(spread, TOO_FEW))),
      factor,
      semiAxes: shape?.semiAxes ?? [null, null],
      angle: shape?.angle ?? null,
      points: common.map((point) =>
        withReasons((inner) => {
          const distance2 = inner('distance2', () => squaredDistance(required(spread, TOO_FEW), point))
          return {
            laboratory: point.laboratory,
            x: x.restore(point.x),
            y: y.restore(point.y),
            distance2,
            pValue: distance2 === null ? null : inner('pValue', () => ownPValue(distance2, common.length)),
          }
        }),
      ),
    }
  })
}

const TOO_FEW = 'Too few laboratories have both materials.'

function restored({ restore }: PlottedMaterial, deviation: number | undefined): number | null {
  return deviation === undefined ? null : restore(deviation)
}

function medianPoint(points: readonly PlotPoint[]): PlotPoint {
  return { x: median(points.map(({ x }) => x)), y: median(points.map(({ y }) => y)) }
}
