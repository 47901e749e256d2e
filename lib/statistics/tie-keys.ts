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
  let largest = 0
  for (let at = 0; at < values.length; at += 1) largest = Math.max(largest, Math.abs(values[at]!))
  return placeOfExtreme(values, largest, 1)
}

/** The place of the smallest value; of several that differ by rounding alone, the first. */
export function placeOfSmallest(values: Float64Array): number {
  let largest = 0
  for (let at = 0; at < values.length; at += 1) largest = Math.max(largest, Math.abs(values[at]!))
  return placeOfExtreme(values, largest, -1)
}

function placeOfExtreme(values: Float64Array, largest: number, direction: 1 | -1): number {
  let place = 0
  let extreme = -Infinity
  for (let at = 0; at < values.length; at += 1) {
    const key = direction * tieKey(values[at]!, largest)
    if (key > extreme) {
      extreme = key
      place = at
    }
  }
  return place
}

function tieKey(value: number, largest: number): number {
  return largest === 0 ? 0 : Math.round((value / largest) * 1e12)
}
