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
  let known = new Map<number, Map<number, Map<number, number>>>()
  let size = 0
  return (share, df1, df2) => {
    const found = known.get(share)?.get(df1)?.get(df2)
    if (found !== undefined) return found
    const value = compute(share, df1, df2)
    if (size >= MOST) {
      known = new Map()
      size = 0
    }
    size += 1
    const ofShare = known.get(share) ?? new Map<number, Map<number, number>>()
    const ofBoth = ofShare.get(df1) ?? new Map<number, number>()
    known.set(share, ofShare.set(df1, ofBoth.set(df2, value)))
    return value
  }
}
