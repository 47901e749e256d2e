import { fQuantileUpper } from '@/lib/statistics/distributions/f'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The figures behind the two-sample plot: the laboratories' cell means on two
 * materials, their covariance, and each one's distance from the centre.
 *
 * Values may be deviations from any origin per material. Order is irrelevant.
 *
 * Source: Youden 1959; for the ellipse see `predictionFactor`.
 */
export type PlotPoint = { x: number; y: number }

export type PlotSpread = {
  mean: [number, number]
  sd: [number, number]
  covariance: number
}

/**
 * Mean, standard deviations and covariance of the points, on p − 1 degrees of freedom, each in the unit of its material;
 * the covariance in the product of the two.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2.
 *
 * Source: Youden 1959.
 */
export function plotSpread(points: readonly PlotPoint[]): PlotSpread {
  const count = points.length
  if (count < 2) throw new NotComputable('too-few-laboratories', 'Two laboratories must have both materials.')
  // From the first point, so that the mean of equal values is that value.
  const first = points[0]!
  const mean: [number, number] = [first.x, first.y]
  for (const { x, y } of points) {
    mean[0] += (x - first.x) / count
    mean[1] += (y - first.y) / count
  }
  let xx = 0
  let yy = 0
  let xy = 0
  for (const { x, y } of points) {
    xx += (x - mean[0]) ** 2
    yy += (y - mean[1]) ** 2
    xy += (x - mean[0]) * (y - mean[1])
  }
  const df = count - 1
  return { mean, sd: [Math.sqrt(xx / df), Math.sqrt(yy / df)], covariance: xy / df }
}

/**
 * The correlation of the two materials' cell means, from −1 to 1: near 1 where laboratories keep their place.
 *
 * @throws {NotComputable} `no-scatter` when one material's means are all equal.
 */
export function correlation({ sd, covariance }: PlotSpread): number {
  if (sd[0] === 0 || sd[1] === 0)
    throw new NotComputable('no-scatter', 'The cell means of a material are all equal.')
  return Math.min(1, Math.max(-1, covariance / (sd[0] * sd[1])))
}

/**
 * Squared Mahalanobis distance within which a further laboratory of the same population lies with 95 %:
 * 2(p² − 1)/(p(p − 2)) F_{0.95; 2, p−2}. The plotted laboratories shaped the ellipse themselves, so it is not for
 * flagging them: see {@link ownPValue}.
 *
 * @throws {NotComputable} `too-few-laboratories` below 4.
 *
 * Source: Hotelling's T² of a further observation, in two dimensions.
 */
export function predictionFactor(laboratories: number): number {
  const p = laboratories
  if (p < 4) throw new NotComputable('too-few-laboratories', 'The ellipse needs four laboratories.')
  return ((2 * (p ** 2 - 1)) / (p * (p - 2))) * fQuantileUpper(0.05, 2, p - 2)
}

/**
 * Half-lengths of the ellipse at squared distance `factor`, major first, and the direction of the major axis in
 * (−π/2, π/2]. Lengths are in the unit of the materials, which must then be one; the minor one may be 0.
 */
export function ellipse(spread: PlotSpread, factor: number): { semiAxes: [number, number]; angle: number } {
  const { large, small, angle } = principalAxes(spread)
  return { semiAxes: [Math.sqrt(factor * large), Math.sqrt(factor * Math.max(0, small))], angle }
}

/**
 * Squared Mahalanobis distance of a point from the mean of all, a pure number.
 *
 * @throws {NotComputable} `on-a-line` when the points do not spread in two directions.
 */
export function squaredDistance(spread: PlotSpread, point: PlotPoint): number {
  const [sdX, sdY] = spread.sd
  // In standard deviations: the product of two variances may be no double.
  const correlated = spread.covariance / (sdX * sdY)
  const determinant = 1 - correlated ** 2
  if (!(determinant > 1e-14)) throw new NotComputable('on-a-line', 'The laboratories lie on one line.')
  const x = (point.x - spread.mean[0]) / sdX
  const y = (point.y - spread.mean[1]) / sdY
  return (x ** 2 - 2 * correlated * x * y + y ** 2) / determinant
}

/**
 * Chance of so great a distance for one of the plotted laboratories, which has itself a share in the centre and the
 * covariance: (1 − d² p/(p − 1)²)^((p − 3)/2).
 *
 * @throws {NotComputable} `too-few-laboratories` below 4.
 *
 * Source: in a normal sample d² p/(p − 1)² has a beta distribution, of shapes 1 and (p − 3)/2.
 */
export function ownPValue(distance2: number, laboratories: number): number {
  if (laboratories < 4) throw new NotComputable('too-few-laboratories', 'A p-value needs four laboratories.')
  const share = (distance2 * laboratories) / (laboratories - 1) ** 2
  return Math.max(0, 1 - share) ** ((laboratories - 3) / 2)
}

function principalAxes({ sd, covariance }: PlotSpread): { large: number; small: number; angle: number } {
  const [xx, yy] = [sd[0] ** 2, sd[1] ** 2]
  const middle = (xx + yy) / 2
  const reach = Math.hypot((xx - yy) / 2, covariance)
  const half = Math.atan2(2 * covariance, xx - yy) / 2
  const large = middle + reach
  // The small one by division: as a difference it would lose its digits when the ellipse is thin.
  const small = large === 0 ? 0 : yy * (xx / large) - covariance * (covariance / large)
  return { large, small, angle: half <= -Math.PI / 2 ? half + Math.PI : half }
}
