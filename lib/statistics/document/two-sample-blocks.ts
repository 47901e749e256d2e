import type { MaterialAnalysis, TwoSamplePlot } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import {
  type Attempt,
  notComputable,
  OUT_OF_RANGE,
  required,
  withReasons,
} from '@/lib/statistics/document/attempt'
import { median } from '@/lib/statistics/median'
import { areMeansEqual } from '@/lib/statistics/spread-of-means'
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
 * What too few laboratories do not give is `null` (`too-few-laboratories`), and so is what no double holds
 * (`out-of-range`). Source: Youden 1959; `two-sample-plot.ts`.
 */
export function twoSampleBlock(x: PlottedMaterial, y: PlottedMaterial): TwoSamplePlot {
  const onY = new Map(y.summaries.map((summary) => [summary.laboratory, summary]))
  const ofX = x.summaries.filter(({ laboratory }) => onY.has(laboratory))
  const xs = meansToPlot(ofX)
  const ys = meansToPlot(ofX.map(({ laboratory }) => onY.get(laboratory)!))
  const common = ofX.map(({ laboratory }, index) => ({ laboratory, x: xs[index]!, y: ys[index]! }))

  return withReasons((attempt) => {
    const spread = attempt('covariance', () => plotSpread(common))
    const factor = attempt('factor', () => predictionFactor(common.length))
    const shape = attempt('angle', () => ellipse(required(spread, TOO_FEW), required(factor, TOO_FEW)))
    return {
      x: x.material,
      y: y.material,
      laboratories: common.length,
      mean: pairOf(attempt, 'mean', () => {
        const { mean } = required(spread, TOO_FEW)
        return [x.restore(mean[0]), y.restore(mean[1])]
      }),
      median: pairOf(attempt, 'median', () => {
        const middle = medianPoint(common)
        return [x.restore(middle.x), y.restore(middle.y)]
      }),
      sd: pairOf(attempt, 'sd', () => required(spread, TOO_FEW).sd),
      covariance: spread?.covariance ?? null,
      correlation: attempt('correlation', () => correlation(required(spread, TOO_FEW))),
      factor,
      semiAxes: pairOf(attempt, 'semiAxes', () => required(shape, TOO_FEW).semiAxes),
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

/** The means in their order; one and the same where they differ by rounding alone, which has no correlation with anything. */
function meansToPlot(summaries: readonly CellSummary[]): number[] {
  const first = summaries[0]?.mean ?? 0
  return areMeansEqual(summaries) ? summaries.map(() => first) : summaries.map(({ mean }) => mean)
}

/** A figure of each material under one key, which has the reason where either is missing. */
function pairOf(
  attempt: Attempt,
  key: string,
  compute: () => [number, number],
): [number | null, number | null] {
  const found = attempt(key, compute) ?? [null, null]
  const inRange = found.map((one) => (one !== null && Number.isFinite(one) ? one : null))
  if (found[0] !== null && inRange.includes(null)) {
    attempt(key, () => notComputable('out-of-range', OUT_OF_RANGE))
  }
  return [inRange[0]!, inRange[1]!]
}

function medianPoint(points: readonly PlotPoint[]): PlotPoint {
  if (points.length === 0) notComputable('too-few-laboratories', TOO_FEW)
  return { x: median(points.map(({ x }) => x)), y: median(points.map(({ y }) => y)) }
}
