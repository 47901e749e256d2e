import cdf from '@stdlib/stats-base-dists-t-cdf'
import quantile from '@stdlib/stats-base-dists-t-quantile'
import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'

/** Student's t distribution for any real number of degrees of freedom; the upper tail is taken by symmetry. */
export function tLowerTail(t: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(t)
  return cdf(t, df)
}

export function tUpperTail(t: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(t)
  return cdf(-t, df)
}

/** The t below which a share p lies. */
export function tQuantileLower(p: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireFraction(p)
  return quantile(p, df)
}

/** The t above which a share alpha lies. */
export function tQuantileUpper(alpha: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireFraction(alpha)
  return -quantile(alpha, df)
}
