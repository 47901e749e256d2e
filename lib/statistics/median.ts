/**
 * The middle value, or the mean of the two middle ones, in the unit of the values. Order is irrelevant.
 *
 * @throws {RangeError} without a value.
 */
export function median(values: readonly number[] | Float64Array): number {
  if (values.length === 0) throw new RangeError('median requires at least one value')
  const sorted = Float64Array.from(values).sort()
  const middle = Math.floor(sorted.length / 2)
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}
