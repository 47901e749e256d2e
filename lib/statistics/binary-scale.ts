/**
 * A power of two near the largest of the values, in their unit; 1 when all are 0 or there is none.
 *
 * Divided by it, or multiplied by its inverse (exactly, as only the exponent changes), values of 1e-300 or 1e300 can be
 * squared like any others.
 */
export function binaryScale(values: Iterable<number>): number {
  let largest = 0
  for (const value of values) largest = Math.max(largest, Math.abs(value))
  return binaryScaleOf(largest)
}

/** {@link binaryScale} of values whose largest size is known. */
export function binaryScaleOf(largest: number): number {
  if (largest === 0) return 1
  // Held short of the ends of the exponent's range, so that dividing by it cannot overflow either.
  return 2 ** Math.max(-1000, Math.min(1000, Math.floor(Math.log2(largest))))
}
