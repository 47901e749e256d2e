import type { CellFigures } from '@/lib/statistics/surprise'

/**
 * The figures of a cell after one of its results is replaced, or left out (`null`), from sums and not from all the
 * results: a cell of thousands has thousands of such changes.
 *
 * `groups` has the innermost group of each value. `null` is answered where the sums do not tell, because what is left is
 * little beside what was taken away; the results themselves must then be looked at.
 *
 * Source: our own; the updating of sums of squares is that of Chan, Golub & LeVeque.
 */
export function oneResultChanged(
  values: readonly number[],
  groups: readonly string[],
): (index: number, to: number | null) => CellFigures | null {
  const byGroup = new Map<string, Sums>()
  values.forEach((value, index) => {
    const own = byGroup.get(groups[index]!) ?? { n: 0, mean: 0, squares: 0 }
    byGroup.set(groups[index]!, withValue(own, value))
  })
  let squares = 0
  let total = 0
  for (const own of byGroup.values()) {
    squares += own.squares
    total += own.n * own.mean
  }
  return (index, to) => {
    const value = values[index]!
    const own = byGroup.get(groups[index]!)!
    const left = withoutValue(own, value)
    const changed = to === null ? left : withValue(left, to)
    const n = values.length - (to === null ? 1 : 0)
    const df = n - byGroup.size + (changed.n === 0 ? 1 : 0)
    const rest = squares - own.squares + changed.squares
    const sum = total - value + (to ?? 0)
    const isLost =
      !(rest > SURE * (squares + changed.squares)) ||
      !(Math.abs(sum) > SURE * (Math.abs(total) + Math.abs(value) + Math.abs(to ?? 0)))
    if (isLost || !Number.isFinite(rest) || !Number.isFinite(sum)) return null
    return { n, mean: sum / n, sd: df >= 1 ? Math.sqrt(rest / df) : undefined, df }
  }
}

/** What is left keeps seven digits at least. */
const SURE = 1e-8

type Sums = { n: number; mean: number; squares: number }

function withValue({ n, mean, squares }: Sums, value: number): Sums {
  const apart = value - mean
  return { n: n + 1, mean: mean + apart / (n + 1), squares: squares + (apart * apart * n) / (n + 1) }
}

function withoutValue({ n, mean, squares }: Sums, value: number): Sums {
  if (n === 1) return { n: 0, mean: 0, squares: 0 }
  const apart = value - mean
  return { n: n - 1, mean: mean - apart / (n - 1), squares: squares - (apart * apart * n) / (n - 1) }
}
