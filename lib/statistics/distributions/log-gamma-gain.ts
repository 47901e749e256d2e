/**
 * ln Γ(b + a) - ln Γ(b), for real a, b > 0, with the relative accuracy that the difference of two logarithms loses for a
 * small a.
 *
 * Every term is of the order of a: below 16 the recurrence in b, above it Stirling's formula with the differences of its terms
 * taken before they are lost. For a small a this decides how much of a beta or gamma distribution lies beyond a point: all of
 * it is of the order of a.
 *
 * Source: Abramowitz & Stegun 6.1.15 (recurrence) and 6.1.41 (series).
 */
export function logGammaGain(b: number, a: number): number {
  let climbed = 0
  let at = b
  while (at < SERIES_FROM) {
    climbed += logOfSum(a, at)
    at += 1
  }
  return gainFromSeries(at, a) - climbed
}

const SERIES_FROM = 16

// B(2k) / (2k (2k - 1)) for k = 1 to 6: Abramowitz & Stegun 6.1.41.
const coefficients = [1 / 12, -1 / 360, 1 / 1260, -1 / 1680, 1 / 1188, -691 / 360360]

function gainFromSeries(b: number, a: number): number {
  const growth = Math.log1p(a / b)
  let sum = (b - 0.5) * growth - a + a * Math.log(a + b)
  let power = 1 / b
  for (const [index, coefficient] of coefficients.entries()) {
    sum += coefficient * power * Math.expm1(-(2 * index + 1) * growth)
    power /= b * b
  }
  return sum
}

/** ln((a + b)/b); the quotient of a by the smallest doubles is none. */
function logOfSum(a: number, b: number): number {
  return a > 1e16 * b ? Math.log(a) - Math.log(b) : Math.log1p(a / b)
}
