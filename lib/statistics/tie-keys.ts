/**
 * Whole numbers that order as the values do and are equal where the values differ by rounding alone, that is by less
 * than some 1e-12 of the largest. In the order of the values; 0 for all when all are 0.
 *
 * Two cells of equal scatter at different levels get standard deviations one unit in the last place apart. Which of them
 * a test names must follow the order of the laboratories and not that accident.
 */
export function tieKeys(values: readonly number[]): number[] {
  let largest = 0
  for (const value of values) largest = Math.max(largest, Math.abs(value))
  return largest === 0 ? values.map(() => 0) : values.map((value) => Math.round((value / largest) * 1e12))
}
