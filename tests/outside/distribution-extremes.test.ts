import { expect, it } from 'vitest'
import {
  chiSquaredLowerTail,
  chiSquaredQuantileLower,
  chiSquaredQuantileUpper,
  chiSquaredUpperTail,
} from '@/lib/statistics/distributions/chi-squared'
import { fLowerTail, fQuantileLower, fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { tQuantileUpper, tUpperTail } from '@/lib/statistics/distributions/students-t'
import { DEBIANS_PYTHON, runOutside } from '@/tests/outside/run-outside'

/*
 * The corners that no other program is asked about, beside arbitrary precision: shares from the smallest double on, degrees
 * of freedom from 1e-12 to 1e9. An error is measured against that which the rounding of the argument alone brings about.
 */
type Point = { what: string; side: 'lower' | 'upper'; at: number; df1: number; df2: number; ours: number }
type Of = (at: number, df1: number, df2: number) => number

const SHARES = [0.4, 1e-5, 1e-60, 1e-299]
const DFS = [1e-12, 1e-3, 1, 2.5, 40, 1e9]
// Sums in hundreds of digits have as many terms as the root of the smaller df: two thousand million are left out.
const PAIRS = DFS.flatMap((df1) => DFS.map((df2) => [df1, df2] as const)).filter(
  ([df1, df2]) => df1 * df2 < 1e12,
)
const ALONE = DFS.map((df) => [Math.min(df, 1e6), 0] as const)

const points = [
  ...pointsOf('t', 'upper', ALONE, tQuantileUpper, tUpperTail),
  ...pointsOf('chisq', 'lower', ALONE, chiSquaredQuantileLower, chiSquaredLowerTail),
  ...pointsOf('chisq', 'upper', ALONE, chiSquaredQuantileUpper, chiSquaredUpperTail),
  ...pointsOf('f', 'lower', PAIRS, fQuantileLower, fLowerTail),
  ...pointsOf('f', 'upper', PAIRS, fQuantileUpper, fUpperTail),
]

it('tails and quantiles keep twelve digits at the ends of the doubles, or those that the argument has', async () => {
  expect(points.length).toBeGreaterThan(300)
  const input = points.map(({ what, side, at, df1, df2, ours }) => [what, side, at, df1, df2, ours])
  const exact = await runOutside({ program: DEBIANS_PYTHON, script: 'extremes.py', input })
  const errors = points.map((point, index) => {
    const { value, magnified } = exact[index] as { value: string; magnified: string }
    const error = Math.abs(point.ours - Number(value)) / Math.abs(Number(value))
    return { ...point, value, magnified, error, share: error / (1e-12 + 1e-15 * Number(magnified)) }
  })
  expect(errors.filter(({ share }) => !(share <= 1))).toEqual([])
}, 300_000)

/** Quantiles at each share, and the tails at those quantiles and at some points far out; nothing below the smallest normal double. */
function pointsOf(
  name: string,
  side: 'lower' | 'upper',
  pairs: readonly (readonly [number, number])[],
  quantile: Of,
  tail: Of,
): Point[] {
  return pairs.flatMap(([df1, df2]) => {
    const quantiles = SHARES.flatMap((at) => {
      try {
        return [{ what: `q${name}`, side, at, df1, df2, ours: quantile(at, df1, df2) }]
      } catch {
        // Beyond the doubles, which the sweep of the unit tests looks at.
        return []
      }
    })
    // The series of chi-squared have as many terms as x has units.
    const farOut = name === 'chisq' ? [1e-250, 1e-20] : [1e-250, 1e-20, 1e20, 1e250]
    const places = [...quantiles.map(({ ours }) => Number(ours.toPrecision(6))), ...farOut]
    const tails = places.map((at) => ({ what: `p${name}`, side, at, df1, df2, ours: tail(at, df1, df2) }))
    return [...quantiles, ...tails].filter(({ at, ours }) => at > 1e-300 && ours > 1e-300)
  })
}
