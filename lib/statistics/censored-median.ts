import { median } from '@/lib/statistics/median'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Median of cell means where some cells are only known to lie below or above a bound.
 *
 * A bound may stand in for such a cell as long as the median lies clear of it: wherever the cell really is, the
 * middle does not move. A cell with results cut off at both ends has no bound and is never clear.
 *
 * Units: `means` one a cell and `bounds` one a censored cell, all as deviations from one origin in unit u; so is
 * the answer. Order is irrelevant.
 *
 * @throws {NotComputable} `no-results`; `median-not-clear`.
 *
 * Source: our own; no number is put in the place of a result that is not known.
 */
export function censoredMedian(
  means: readonly number[],
  bounds: readonly { below: number | null; above: number | null }[],
): number {
  if (means.length + bounds.length === 0) throw new NotComputable('no-results', 'There is no result.')
  const standing = bounds.map(({ below, above }) => below ?? above ?? notClear())
  const ranked = [...means, ...standing].sort((one, other) => one - other)
  const lowerMiddle = ranked[Math.ceil(ranked.length / 2) - 1]!
  const upperMiddle = ranked[Math.floor(ranked.length / 2)]!
  for (const { below, above } of bounds) {
    const clear = below === null ? above! > upperMiddle : below < lowerMiddle
    if (!clear) notClear()
  }
  return median(ranked)
}

function notClear(): never {
  throw new NotComputable(
    'median-not-clear',
    'The median does not lie clear of the limits of the censored results.',
  )
}
