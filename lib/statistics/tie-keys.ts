/**
 * Whole numbers that order as the values do and are equal where the values differ by rounding alone.
 *
 * Two cells of equal scatter at different levels get standard deviations one unit in the last place apart. Which of them
 * a test names must follow the order of the laboratories and not that accident.
 */
export function tieKeys(values: readonly number[]): number[] {
  let largest = 0
  for (const value of values) largest = Math.max(largest, Math.abs(value))
  return largest === 0 ? values.map(() => 0) : values.map((value) => Math.round((value / largest) * 1e12))
}
