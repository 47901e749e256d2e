import { logGammaGain } from '@/lib/statistics/distributions/log-gamma-gain'
import { deviance, stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'
import type { Tails } from '@/lib/statistics/distributions/tails'

/** What two shapes give whatever the point. */
interface BetaShapes {
  readonly a: number
  readonly b: number
  /** √(ab/(a + b)/2π), and the logarithm of what goes with it: the prefix of Loader's form. */
  readonly root: number
  readonly remainder: number
  /** ln(a B(a, b)) and ln(b B(a, b)), made when asked for. */
  logAtLow: number | undefined
  logAtHigh: number | undefined
}

let recent: BetaShapes | undefined

/** The shapes a, b > 0, up to 5e8. The last pair is kept, because cells of one size follow each other. */
export function betaShapes(a: number, b: number): BetaShapes {
  if (recent?.a === a && recent.b === b) return recent
  const sum = a + b
  recent = {
    a,
    b,
    root: Math.sqrt(((a / sum) * b) / (2 * Math.PI)),
    remainder: stirlingRemainder(sum) - stirlingRemainder(a) - stirlingRemainder(b),
    logAtLow: undefined,
    logAtHigh: undefined,
  }
  return recent
}

/** Beyond e to this power, either way, odds are near the ends of the doubles: there both tails are powers of the odds. */
export const FAR = 650

/**
 * Both tails of the beta distribution with given shapes at the point `odds` = x/(1 - x).
 *
 * The point comes as odds because x near 1 has lost the digits of 1 - x, and with their logarithm where the odds themselves
 * are no double. The slope is x^a (1 - x)^b / B(a, b). The tail on x's own side of the mean is got directly and the
 * other as its complement; where a small shape would let the complement lose digits, both come from the power series. Nothing
 * is refused: callers have checked.
 *
 * Source: A. R. DiDonato and A. H. Morris, ACM Trans. Math. Softw. 18 (1992) 360, equations 9 (power series) and 12
 * (continued fraction); prefix by Loader's saddle-point form.
 */
export function incompleteBeta(shapes: BetaShapes, odds: number, logOdds?: number): Tails {
  const { a, b, root } = shapes
  const y = 1 / (1 + odds)
  const x = odds <= 1 ? odds * y : 1 / (1 + 1 / odds)
  if (hasPowerSeries(a, b, x)) {
    const ends = { a, b, odds, logOdds: logOdds ?? Math.log(odds) }
    return fromPowerSeries(ends, logOfBetaAtLow(shapes))
  }
  if (hasPowerSeries(b, a, y)) {
    const ends = { a: b, b: a, odds: 1 / odds, logOdds: -(logOdds ?? Math.log(odds)) }
    const { lower, upper, bend, ...rest } = fromPowerSeries(ends, logOfBetaAtHigh(shapes))
    return { ...rest, lower: upper, upper: lower, bend: -bend }
  }

  const sum = a + b
  const exponent = shapes.remainder - deviance(a, sum * x) - deviance(b, sum * y)
  const logSlope = exponent + Math.log(root)
  const slope = root * Math.exp(exponent)
  // a - (a + b) x, how far x stands below the mean, without the cancellation.
  const bend = (a - b * odds) * y
  const hazard = bend >= 0 ? continuedFraction(a, b, x, y, bend) : continuedFraction(b, a, y, x, -bend)
  // Where the slope has lost digits to underflow the tail may still have them.
  const direct = Math.min(1, slope > 1e-290 ? slope / hazard : Math.exp(logSlope - Math.log(hazard)))
  return bend >= 0
    ? { lower: direct, upper: 1 - direct, slope, logSlope, hazard, bend }
    : { lower: 1 - direct, upper: direct, slope, logSlope, hazard, bend }
}

/** ln(a B(a, b)): to first order in x the lower tail is x^a over this. */
export function logOfBetaAtLow(shapes: BetaShapes): number {
  return (shapes.logAtLow ??= logOfBeta(shapes.a, shapes.b))
}

/** The same at the other end. */
export function logOfBetaAtHigh(shapes: BetaShapes): number {
  return (shapes.logAtHigh ??= logOfBeta(shapes.b, shapes.a))
}

function logOfBeta(a: number, b: number): number {
  return logGammaGain(1, a) - logGammaGain(b, a)
}

/**
 * Whether the end at which x is 0 is near enough. There the continued fraction would need thousands of steps for a small
 * shape, and one minus a lower tail near 1 would have lost the upper one.
 */
function hasPowerSeries(a: number, b: number, x: number): boolean {
  return (a <= 0.5 && x <= 0.5 && b * x <= 1) || x < 1e-280
}

interface EndsOf {
  a: number
  b: number
  odds: number
  logOdds: number
}

/** With L = ln(x^a/(a B)), the lower tail is e^L (1 + a Σ (1 - b)…(n - b) x^n/(n! (a + n))). */
function fromPowerSeries({ a, b, odds, logOdds }: EndsOf, logAtLow: number): Tails {
  const y = 1 / (1 + odds)
  const x = odds * y
  const logOfOne = Math.log1p(odds)
  const leading = a * (logOdds - logOfOne) - logAtLow
  const rest = a * powerSeries(a, b, x)
  const factor = Math.exp(leading)
  const logSlope = Math.log(a) + leading - b * logOfOne
  return {
    lower: Math.min(1, factor * (1 + rest)),
    upper: Math.max(0, -Math.expm1(leading) - factor * rest),
    slope: Math.exp(logSlope),
    logSlope,
    hazard: (a * Math.exp(-b * logOfOne)) / (1 + rest),
    bend: (a - b * odds) * y,
  }
}

// Every term is less than half of the one before, or less than 1/n of it: x ≤ ½ and b x ≤ 1.
const MOST_TERMS = 100

function powerSeries(a: number, b: number, x: number): number {
  let term = 1
  let sum = 0
  for (let n = 1; n <= MOST_TERMS; n++) {
    term *= ((n - b) / n) * x
    const next = sum + term / (a + n)
    if (next === sum) return sum
    sum = next
  }
  throw new Error(`the power series of the beta function has not settled at ${a}, ${b}, ${x}`)
}

/**
 * β0 + α1/(β1 + α2/(β2 + …)), as a quotient of two sums that are carried along. The distance from the mean enters as such: the
 * more familiar fraction holds differences from 1 that cost five digits when one shape is a million times the other.
 *
 * Numerators and denominators are multiplied out, so that a step costs no division, which would take most of its time.
 */
function continuedFraction(a: number, b: number, x: number, y: number, below: number): number {
  const squared = x * x
  let above = a * (below + 1)
  let aboveBefore = 1
  let under = 1
  let underBefore = 0
  let gap = Infinity
  // Slowest at the mean of two large shapes, where the steps grow as the root of the larger one.
  const most = 500 + 3 * Math.sqrt(a + b)
  for (let n = 1; n <= most; n++) {
    const here = a + 2 * n - 1
    const after = here + 2
    const rest = n * (b - n)
    const alpha = (n === 1 ? 1 : here - 2) * after * (a + n - 1) * (a + b + n - 1) * rest * squared
    const beta = (n * here + rest * x) * after + (a + n) * here * (below + 1 + n * (1 + y))
    const aboveNext = beta * above + alpha * aboveBefore
    const underNext = beta * under + alpha * underBefore
    // The sums are rounded at each step: near the last bit the gap stops falling before it is none.
    const product = Math.abs(aboveNext * under)
    const difference = Math.abs(aboveNext * under - above * underNext)
    if (difference < 2e-15 * product) {
      const gapBefore = gap
      gap = difference / product
      if (gap < 2e-16 || gap >= gapBefore) return aboveNext / underNext / (a + 1)
    }
    aboveBefore = above
    underBefore = under
    above = aboveNext
    under = underNext
    if (under > 1e80 || under < -1e80) {
      const scale = 1 / under
      above *= scale
      aboveBefore *= scale
      underBefore *= scale
      under = 1
    }
  }
  throw new Error(`the continued fraction of the beta function has not settled at ${a}, ${b}, ${x}`)
}
