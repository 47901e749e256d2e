/**
 * The value that would stand at place `rank`, from 0, if the values were sorted. They are moved about, but not sorted:
 * for one or two places of many values that takes a fraction of the time.
 *
 * @throws {RangeError} for a rank that is no place among the values.
 *
 * Source: C. A. R. Hoare, Commun. ACM 4 (1961) 321, "Find".
 */
export function orderStatistic(values: Float64Array, rank: number): number {
  if (!Number.isInteger(rank) || rank < 0 || rank >= values.length)
    throw new RangeError(`rank ${rank} is no place among ${values.length} values`)
  let first = 0
  let last = values.length - 1
  while (first < last) {
    const pivot = values[(first + last) >> 1]!
    let up = first
    let down = last
    while (up <= down) {
      while (values[up]! < pivot) up += 1
      while (values[down]! > pivot) down -= 1
      if (up > down) break
      const moved = values[up]!
      values[up] = values[down]!
      values[down] = moved
      up += 1
      down -= 1
    }
    if (rank <= down) last = down
    else if (rank >= up) first = up
    else break
  }
  return values[rank]!
}
