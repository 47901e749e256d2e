/** Guards shared by the distributions: what fails here is a caller's mistake, so it is a RangeError. */

/**
 * Lets pass any real degrees of freedom from 1e-300 to 1e9. Below, a half of them would have lost its digits; above, nobody has
 * looked.
 *
 * @throws {RangeError} for others.
 */
export function requireDegreesOfFreedom(df: number): void {
  if (!(df >= 1e-300 && df <= 1e9))
    throw new RangeError(`degrees of freedom must lie between 1e-300 and 1e9, got ${df}`)
}

/**
 * Lets pass a probability strictly between 0 and 1.
 *
 * @throws {RangeError} for others.
 */
export function requireFraction(p: number): void {
  if (!(p > 0 && p < 1)) throw new RangeError(`a probability must lie strictly between 0 and 1, got ${p}`)
}

/**
 * Lets pass any number; an infinite one has its tails too.
 *
 * @throws {RangeError} for NaN.
 */
export function requireNumber(x: number): void {
  if (Number.isNaN(x)) throw new RangeError('the argument of a distribution must be a number')
}
