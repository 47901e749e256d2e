/** More answers than any study asks for; beyond, the store starts anew. */
const MOST = 20_000

/**
 * The same function, which looks an answer up where it has been given before.
 *
 * Quantiles cost some microseconds, and a study asks for the same few again and again: one for each cell, and cells are of
 * few sizes. A caller's mistake is thrown anew each time.
 */
export function remembered(
  compute: (share: number, df1: number, df2: number) => number,
): (share: number, df1: number, df2: number) => number {
  let known = new Map<number, Map<number | string, number>>()
  let size = 0
  return (share, df1, df2) => {
    const key = keyOf(df1, df2)
    const found = known.get(share)?.get(key)
    if (found !== undefined) return found
    const value = compute(share, df1, df2)
    if (size >= MOST) {
      known = new Map()
      size = 0
    }
    size += 1
    const ofShare = known.get(share) ?? new Map<number | string, number>()
    known.set(share, ofShare.set(key, value))
    return value
  }
}

const BEYOND_COUNTS = 2 ** 26

/** Degrees of freedom are mostly counts, two of which fit into one whole number. */
function keyOf(df1: number, df2: number): number | string {
  return Number.isInteger(df1) && Number.isInteger(df2) && df1 < BEYOND_COUNTS && df2 < BEYOND_COUNTS
    ? df1 * BEYOND_COUNTS + df2
    : `${df1} ${df2}`
}
