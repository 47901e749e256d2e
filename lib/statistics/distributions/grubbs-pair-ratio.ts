import { largestDeviate, type LargestDeviate } from '@/lib/statistics/distributions/largest-deviate'
import { requireFraction, requireNumber } from '@/lib/statistics/distributions/arguments'
import {
  runningIntegral,
  subdivide,
  type RunningIntegral,
} from '@/lib/statistics/distributions/running-integral'

/**
 * Beyond this the distribution is not made: time and memory of the recursion grow somewhat faster than the count, and would hold
 * up its caller for more than a second.
 */
export const largestPairCount = 1000

/**
 * Exact null distribution of Grubbs' pair ratio for `count` normal values: the sum of squares without the two largest over
 * the sum of squares of all.
 *
 * Given which two values are the pair, the ratio r = sin² ω has the density (n - 3) sin^(n-4) ω cos ω in ω, the
 * position of the pair about its mean has a uniform angle, and the other n - 2 lie below both with the probability
 * that their largest standardised deviate stays under y cos ψ, where y is proportional to 1/tan ω. Summed over the n(n - 1)/2
 * possible pairs:
 *
 *   P(R ≤ sin² w) = n(n - 1)(n - 3)/(2π) ∫_0^w sin^(n-4) ω cos ω ∫_β^{π/2} P_{n-2}(y(ω) cos ψ) dψ dω
 *
 * Good to about 1e-12 up to n = 100 and, below a probability of a half, beyond. The integral is made once for each n and
 * kept: 10 ms at n = 20, 50 ms at 100, a second at 1000.
 *
 * @throws {RangeError} for a count other than 4 to 1000; for NaN.
 *
 * Source: F. E. Grubbs, Ann. Math. Statist. 21 (1950) 27, for the recursion; the form by angles is our own working.
 */
export function grubbsPairLowerTail(ratio: number, count: number): number {
  requireCount(count)
  requireNumber(ratio)
  if (ratio <= 0) return 0
  if (ratio >= 1) return 1
  return Math.min(1, Math.max(0, distributionFor(count).upTo(Math.asin(Math.sqrt(ratio)))))
}

/**
 * The ratio below which a share p lies.
 *
 * @throws {RangeError} for a count other than 4 to 1000; for p not strictly between 0 and 1.
 */
export function grubbsPairQuantileLower(p: number, count: number): number {
  requireCount(count)
  requireFraction(p)
  const { upTo } = distributionFor(count)
  let low = 0
  let high = Math.PI / 2
  // Evaluation is cheap, so bisection down to neighbouring doubles: 1,075 halvings lead to the least of them, 53 to a neighbour.
  for (let turn = 0; turn < 1075 + 53; turn++) {
    const middle = low + (high - low) / 2
    if (middle === low || middle === high) break
    if (upTo(middle) < p) low = middle
    else high = middle
  }
  return Math.sin(low + (high - low) / 2) ** 2
}

const kept = new Map<number, RunningIntegral>()

function distributionFor(count: number): RunningIntegral {
  const known = kept.get(count)
  if (known) return known
  const made = pairDistribution(count)
  kept.set(count, made)
  return made
}

function pairDistribution(n: number): RunningIntegral {
  const others = largestDeviate(n - 2)
  const beta = Math.atan(Math.sqrt((n - 2) / n))
  // y = reach / tan ω, in the standardisation of the other n - 2 values.
  const reach = Math.sqrt((n / (2 * (n - 2)) + 0.5) * ((n - 2) / (n - 3)))
  const constant = (n * (n - 1) * (n - 3)) / (2 * Math.PI)
  const breaks = [0, ...others.breaks.map((tau) => Math.atan((reach * Math.cos(beta)) / tau))]
  return runningIntegral(subdivide(breaks, 1.5 / Math.sqrt(n)), (omega) => {
    const position = integralOverPosition({ others, y: reach / Math.tan(omega), beta })
    return constant * Math.sin(omega) ** (n - 4) * Math.cos(omega) * position
  })
}

/** ∫_β^{π/2} P(y cos ψ) dψ, piece by piece between the breaks of P; 1 above its first break and 0 below its last. */
function integralOverPosition({
  others,
  y,
  beta,
}: {
  others: LargestDeviate
  y: number
  beta: number
}): number {
  const { breaks, lowerTail } = others
  const edges = breaks.map((tau) => Math.max(beta, Math.acos(Math.min(1, tau / y))))
  let sum = (edges[0] as number) - beta
  for (let index = 1; index < edges.length; index++) {
    const from = edges[index - 1] as number
    const length = (edges[index] as number) - from
    if (length <= 0) continue
    // The same stretching of the piece as in the running integral, here for square roots at its ends.
    for (const { theta, weight } of rule) {
      sum += weight * length * lowerTail(y * Math.cos(from + length * Math.sin(theta / 2) ** 2))
    }
  }
  return sum
}

/** Gauss–Legendre points in θ on (0, π), with the weight of the stretched variable. */
const rule = gaussLegendre(20).map(({ x, weight }) => {
  const theta = (Math.PI / 2) * (x + 1)
  return { theta, weight: (Math.PI / 4) * weight * Math.sin(theta) }
})

function gaussLegendre(points: number): { x: number; weight: number }[] {
  return Array.from({ length: points }, (_, i) => {
    let x = Math.cos((Math.PI * (i + 0.75)) / (points + 0.5))
    let slope = 1
    // Newton's method from this start is at full precision well within eight steps.
    for (let turn = 0; turn < 8; turn++) {
      let previous = 1
      let value = x
      for (let k = 2; k <= points; k++)
        [previous, value] = [value, ((2 * k - 1) * x * value - (k - 1) * previous) / k]
      slope = (points * (x * value - previous)) / (x * x - 1)
      x -= value / slope
    }
    return { x, weight: 2 / ((1 - x * x) * slope * slope) }
  })
}

function requireCount(count: number): void {
  if (Number.isInteger(count) && count >= 4 && count <= largestPairCount) return
  throw new RangeError(`the pair ratio needs 4 to ${largestPairCount} values, got ${count}`)
}
