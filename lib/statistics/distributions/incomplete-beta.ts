import type { Tails } from '@/lib/statistics/distributions/incomplete-gamma'
import { deviance, stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'

/**
 * Both tails of the beta distribution with shapes a, b > 0 at the point `odds` = x/(1 - x).
 *
 * The point comes as odds because x near 1 has lost the digits of 1 - x. `slope` is the derivative of the lower
 * tail with respect to ln odds, which is x^a (1 - x)^b / B(a, b). As in the gamma function the tail on x's own side
 * is got directly and the other as its complement. Nothing is refused: callers have checked.
 *
 * Source: A. R. DiDonato and A. H. Morris, ACM Trans. Math. Softw. 18 (1992) 360, equation 12 (continued
 * fraction); prefix by Loader's saddle-point form.
 */
export function incompleteBeta(a: number, b: number, odds: number): Tails {
  const x = odds / (1 + odds)
  const y = 1 / (1 + odds)
  const sum = a + b
  const exponent =
    stirlingRemainder(sum) -
    stirlingRemainder(a) -
    stirlingRemainder(b) -
    deviance(a, sum * x) -
    deviance(b, sum * y)
  const slope = Math.exp(exponent) * Math.sqrt(((a / sum) * b) / (2 * Math.PI))

  // a - (a + b) x, how far x stands below the mean, without the cancellation.
  const below = (a - b * odds) * y
  if (below >= 0) {
    const lower = Math.min(1, slope / continuedFraction({ a, b, x, y, below }))
    return { lower, upper: 1 - lower, slope }
  }
  const upper = Math.min(1, slope / continuedFraction({ a: b, b: a, x: y, y: x, below: -below }))
  return { lower: 1 - upper, upper, slope }
}

interface FractionOf {
  a: number
  b: number
  x: number
  y: number
  below: number
}

/**
 * β0 + α1/(β1 + α2/(β2 + …)), by the modified Lentz recurrence. The distance from the mean enters as such: the more
 * familiar fraction holds differences from 1 that cost five digits when one shape is a million times the other.
 */
function continuedFraction({ a, b, x, y, below }: FractionOf): number {
  let c = (a * (below + 1)) / (a + 1)
  let value = c
  let d = 0
  for (let n = 1; ; n++) {
    const twice = a + 2 * n - 1
    const rest = (n * (b - n) * x) / twice
    const alpha = ((a + n - 1) / twice) * (a + b + n - 1) * rest * x
    const beta = n + rest + ((a + n) / (twice + 2)) * (below + 1 + n * (1 + y))
    d = 1 / (beta + alpha * d)
    c = beta + alpha / c
    const factor = c * d
    value *= factor
    if (Math.abs(factor - 1) < 3e-16) return value
  }
}
