/**
 * Whole numbers that order as the values do and are equal where the values differ by rounding alone, that is by less
 * than some 1e-12 of the largest. In the order of the values; 0 for all when all are 0.
 *
 * Two cells of equal scatter at different levels get standard deviations one unit in the last place apart. Which of them
 * a test names must follow the order of the laboratories and not that accident.
 */
export function tieKeys(values: readonly number[] | Float64Array): Float64Array {
  let largest = 0
  for (const value of values) largest = Math.max(largest, Math.abs(value))
  const keys = Float64Array.from(values)
  for (let at = 0; at < keys.length; at += 1) keys[at] = tieKey(keys[at]!, largest)
  return keys
}

/** The place of the largest value; of several that differ by rounding alone, the first. */
export function placeOfLargest(values: Float64Array): number {
  return placeOfExtreme(values, 1)
}

/** The place of the smallest value; of several that differ by rounding alone, the first. */
export function placeOfSmallest(values: Float64Array): number {
  return placeOfExtreme(values, -1)
}

function placeOfExtreme(values: Float64Array, direction: 1 | -1): number {
  let largest = 0
  let extreme = -Infinity
  for (let at = 0; at < values.length; at += 1) {
    const value = direction * values[at]!
    if (value > extreme) extreme = value
    if (Math.abs(value) > largest) largest = Math.abs(value)
  }
  const key = tieKey(extreme, largest)
  // Keys are only taken of those that come close: they cost a division each.
  const close = extreme - 4e-12 * largest
  for (let at = 0; at < values.length; at += 1) {
    const value = direction * values[at]!
    if (value >= close && tieKey(value, largest) === key) return at
  }
  return 0
}

function tieKey(value: number, largest: number): number {
  return largest === 0 ? 0 : Math.round((value / largest) * 1e12)
}
