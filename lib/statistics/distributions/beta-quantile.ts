import {
  betaShapes,
  FAR,
  incompleteBeta,
  logOfBetaAtHigh,
  logOfBetaAtLow,
} from '@/lib/statistics/distributions/incomplete-beta'
import { normalQuantile } from '@/lib/statistics/distributions/normal'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'
import type { Side } from '@/lib/statistics/distributions/tails'

interface BetaQuantileOf {
  a: number
  b: number
  side: Side
  /** At most a half. */
  p: number
}

/**
 * The logarithm of F, which is the odds x/(1 - x) times b/a, beyond which, on the given side, a share p of the beta
 * distribution with shapes a, b lies.
 *
 * The logarithm is a double even where F is none. That of the odds would be rounded more coarsely wherever the shapes are
 * far apart: the bulk of F lies about 0 on this scale. Nothing is refused: callers have checked.
 */
export function betaQuantileLogF({ a, b, side, p }: BetaQuantileOf): number {
  const shapes = betaShapes(a, b)
  const logRatio = Math.log(a) - Math.log(b)
  const [logLower, logUpper] =
    side === 'lower' ? [Math.log(p), Math.log1p(-p)] : [Math.log1p(-p), Math.log(p)]
  // Only a small shape holds shares so far out; there a tail is a power of the odds, and solved at once.
  if (logLower < -FAR_SHARE * a) {
    const u = (logLower + logOfBetaAtLow(shapes)) / a
    if (u < -FAR) return u - logRatio
  }
  if (logUpper < -FAR_SHARE * b) {
    const u = -(logUpper + logOfBetaAtHigh(shapes)) / b
    if (u > FAR) return u - logRatio
  }
  return solveTail({
    at: (logF) => {
      const u = logF + logRatio
      return incompleteBeta(shapes, Math.abs(logRatio) < 50 ? (a / b) * Math.exp(logF) : Math.exp(u), u)
    },
    side,
    target: p,
    start: startOf({ a, b, side, p }),
    low: -FAR - 1 - logRatio,
    high: FAR + 1 - logRatio,
  })
}

// ln(a B(a, b))/a is above -25 for the shapes at hand.
const FAR_SHARE = FAR - 50

/** Where the share is nearly normal, an approximation through the normal quantile; else F is 1, near its mean. */
function startOf({ a, b, side, p }: BetaQuantileOf): number {
  if (p < 1e-30) return 0
  if (a === 0.5 && b >= 1) return startOfSquare(side === 'upper' ? p : 1 - p, 2 * b)
  if (b === 0.5 && a >= 1) return -startOfSquare(side === 'lower' ? p : 1 - p, 2 * a)
  if (a < 1 || b < 1) return 0

  // Abramowitz & Stegun 26.5.22.
  const z = side === 'lower' ? normalQuantile(p) : -normalQuantile(p)
  const [ofA, ofB] = [1 / (2 * a - 1), 1 / (2 * b - 1)]
  const h = 2 / (ofA + ofB)
  const lambda = (z * z - 3) / 6
  if (h + lambda < 0) return 0
  const w = (z * Math.sqrt(h + lambda)) / h + (ofB - ofA) * (lambda + 5 / 6 - 2 / (3 * h))
  return 2 * w
}

/** For t² with t on `df`: to first order ln(1 + t²/df) is z²/df, z the normal point of the same share. */
function startOfSquare(upper: number, df: number): number {
  const z = normalQuantile(upper / 2)
  return Math.log(df * Math.expm1((z * z) / Math.max(0.5, df - 0.5)))
}
