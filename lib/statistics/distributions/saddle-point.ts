/**
 * The two pieces of Loader's saddle-point form of the gamma and beta densities.
 *
 * Written out, x^a e^-x / Γ(a + 1) is a quotient of enormous numbers whose logarithms cancel: at 10,000 degrees
 * of freedom five digits are gone. Loader's form e^(-remainder(a) - deviance(a, x)) / √(2πa) holds only small terms.
 *
 * Source: C. Loader, Fast and accurate computation of binomial probabilities (2000), sections 2 and 3.
 */

/**
 * What Stirling's formula leaves out: ln Γ(a + 1) - (a + ½) ln a + a - ½ ln 2π, for any real a > 0.
 *
 * From 16 on the asymptotic series is exact to the last bit; below, the recurrence in a leads there. The error is
 * absolute (about 1e-16 a step), which is what matters for a term that is exponentiated. Halves of whole degrees of freedom,
 * which nearly every caller brings, are climbed once and kept.
 */
export function stirlingRemainder(a: number): number {
  if (a >= SERIES_FROM) return stirlingSeries(a)
  const halves = 2 * a
  return Number.isInteger(halves) ? (ofHalves[halves] as number) : climb(a)
}

const SERIES_FROM = 16
const ofHalves = Array.from({ length: 2 * SERIES_FROM }, (_, halves) =>
  halves === 0 ? 0 : climb(halves / 2),
)

function climb(a: number): number {
  let climbed = 0
  let at = a
  while (at < SERIES_FROM) {
    // The reciprocal of the smallest doubles is none.
    const logarithm = at < 1e-300 ? -Math.log(at) : Math.log1p(1 / at)
    climbed += (at + 0.5) * logarithm - 1
    at += 1
  }
  return climbed + stirlingSeries(at)
}

// Coefficients B(2k) / (2k (2k - 1)): Abramowitz & Stegun 6.1.41.
function stirlingSeries(a: number): number {
  const square = 1 / (a * a)
  return (
    (1 / 12 -
      (1 / 360 - (1 / 1260 - (1 / 1680 - (1 / 1188 - (691 / 360360) * square) * square) * square) * square) *
        square) /
    a
  )
}

/**
 * a ln(a / x) + x - a, for a > 0 and x > 0: never negative, 0 where they meet.
 *
 * Near the meeting point the three terms cancel, so there the series in v = (a - x) / (a + x) is summed.
 */
export function deviance(a: number, x: number): number {
  const difference = a - x
  if (Math.abs(difference) > 0.1 * (a + x)) return a * Math.log(a / x) - difference

  const v = difference / (a + x)
  const square = v * v
  let power = 2 * a * v
  let sum = difference * v
  // v² is below 1/100, so the eighth term is under the last bit of the first.
  for (let odd = 3; odd <= 21; odd += 2) {
    power *= square
    const next = sum + power / odd
    if (next === sum) break
    sum = next
  }
  return sum
}
