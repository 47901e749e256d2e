/** Results of one material: integers at a common decimal scale, one list a cell. */
export type IntegerCells = readonly (readonly bigint[])[]

/** A corner of the polygon G: halfway up a jump of the distribution of differences. */
type Corner = { size: number; share: number }

/**
 * The sizes of many differences, seen through their distribution. There are as many as the square of the results, so they
 * are counted along the sorted values and never listed.
 */
export type Differences = {
  shareOfTies: number
  areAllEqual: boolean
  /** The neighbouring corners between which G reaches the target, or `null` where it ends below. */
  crossing: (target: number) => { from: Corner; to: Corner } | null
}

/**
 * Differences of results of different cells, every pair of cells counted alike. Sizes are in the cells' own integers;
 * equal differences are equal, as nothing is rounded. It needs two cells, each with a result.
 *
 * Source: ISO 13528, Annex C.5, the distribution H and the polygon G.
 */
export function differencesBetween(cells: IntegerCells): Differences {
  return areSmall(cells) ? betweenCells(NUMBERS, asNumbers(cells)) : betweenCells(BIGINTS, cells)
}

/**
 * Differences of results of one cell, every cell counted alike; sizes and ties as {@link differencesBetween}. Each cell
 * holds two results or more.
 *
 * Source: ISO 13528, Annex C.5.
 */
export function differencesWithin(cells: IntegerCells): Differences {
  return areSmall(cells) ? withinCells(NUMBERS, asNumbers(cells)) : withinCells(BIGINTS, cells)
}

/** Whole numbers: doubles while they hold them, beyond that the slower exact ones. */
type Whole<T> = { one: T; minus: (a: T, b: T) => T; plus: (a: T, b: T) => T; half: (x: T) => T }

const NUMBERS: Whole<number> = {
  one: 1,
  minus: (a, b) => a - b,
  plus: (a, b) => a + b,
  half: (x) => Math.floor(x / 2),
}

const BIGINTS: Whole<bigint> = { one: 1n, minus: (a, b) => a - b, plus: (a, b) => a + b, half: (x) => x / 2n }

function areSmall(cells: IntegerCells): boolean {
  const [least, most] = ends(cells)
  return most - least <= BigInt(Number.MAX_SAFE_INTEGER)
}

function asNumbers(cells: IntegerCells): number[][] {
  const [least] = ends(cells)
  return cells.map((cell) => cell.map((number) => Number(number - least)))
}

function ends(cells: IntegerCells): [bigint, bigint] {
  let least = cells[0]![0]!
  let most = least
  for (const cell of cells) {
    for (const number of cell) {
      if (number < least) least = number
      if (number > most) most = number
    }
  }
  return [least, most]
}

/** Values in ascending order, and for each the weights of those before it added up. */
type Pool<T> = { values: readonly T[]; weights: Float64Array; before: Float64Array }

function betweenCells<T>(whole: Whole<T>, cells: readonly (readonly T[])[]): Differences {
  const pool = sortedPool(cells, ({ length }) => 1 / length)
  // Differences inside a cell do not count; a cell of one result has none.
  const own = cells
    .filter(({ length }) => length > 1)
    .map((cell) => sortedPool([cell], () => 1 / cell.length))
  const pairsOfCells = (cells.length * (cells.length - 1)) / 2
  const pairs = (x: T): number =>
    own.reduce((sum, one) => sum - pairsUpTo(whole, one, x), pairsUpTo(whole, pool, x))
  const [first] = cells
  const isBalanced = cells.every(({ length }) => length === first!.length)
  const allPairs = pairsOfCells * first!.length ** 2
  const weight = (x: T): number =>
    own.reduce((sum, one) => sum - weightUpTo(whole, one, x), weightUpTo(whole, pool, x)) / pairsOfCells
  // Whole counts keep a share exact where every pair weighs alike.
  return distribution({ whole, pool, pairs, share: isBalanced ? (x) => pairs(x) / allPairs : weight })
}

function withinCells<T>(whole: Whole<T>, cells: readonly (readonly T[])[]): Differences {
  const own = cells.map((cell) => sortedPool([cell], () => 1))
  const sum = (of: (one: Pool<T>) => number): number => own.reduce((total, one) => total + of(one), 0)
  const pairs = (x: T): number => sum((one) => pairsUpTo(whole, one, x))
  const pairsIn = ({ values }: Pool<T>): number => (values.length * (values.length - 1)) / 2
  const [first] = own
  const isBalanced = own.every(({ values }) => values.length === first!.values.length)
  const allPairs = sum(pairsIn)
  const share = (x: T): number =>
    isBalanced ? pairs(x) / allPairs : sum((one) => pairsUpTo(whole, one, x) / pairsIn(one)) / own.length
  const widest = own.reduce((widest, one) => (rangeOf(whole, one) > rangeOf(whole, widest) ? one : widest))
  return distribution({ whole, pool: widest, pairs, share })
}

function distribution<T>(one: {
  whole: Whole<T>
  /** The values among which the largest difference is found. */
  pool: Pool<T>
  pairs: (x: T) => number
  share: (x: T) => number
}): Differences {
  const { whole, pairs, share } = one
  const { minus, plus, half, one: unit } = whole
  const nothing = minus(unit, unit)
  const range = rangeOf(whole, one.pool)
  const allPairs = pairs(range)

  /** The smallest whole number above `low` at which the claim holds; it holds at `high`. */
  const smallest = (low: T, high: T, holds: (x: T) => boolean): T => {
    let [from, to] = [low, high]
    while (minus(to, from) > unit) {
      const middle = plus(from, half(minus(to, from)))
      if (holds(middle)) to = middle
      else from = middle
    }
    return to
  }
  /** The largest difference below x, which is above 0; `null` where there is none, not even a tie. */
  const below = (x: T): T | null => {
    const rest = pairs(minus(x, unit))
    return rest === 0 ? null : smallest(minus(nothing, unit), minus(x, unit), (y) => pairs(y) === rest)
  }
  const above = (x: T): T => {
    const upTo = pairs(x)
    return smallest(x, range, (y) => pairs(y) > upTo)
  }
  const corner = (x: T | null): Corner => {
    if (x === null || x === nothing) return { size: 0, share: 0 }
    const lower = below(x)
    return { size: Number(x), share: ((lower === null ? 0 : share(lower)) + share(x)) / 2 }
  }

  return {
    shareOfTies: share(nothing),
    areAllEqual: pairs(nothing) === allPairs,
    crossing: (target) => {
      // G halves each jump: where the distribution passes the target G is there too, or at the next difference.
      const passing = smallest(nothing, range, (x) => share(x) >= target)
      const at = corner(passing)
      if (at.share >= target) return { from: corner(below(passing)), to: at }
      if (pairs(passing) === allPairs) return null
      return { from: at, to: corner(above(passing)) }
    },
  }
}

function sortedPool<T>(cells: readonly (readonly T[])[], weightIn: (cell: readonly T[]) => number): Pool<T> {
  const entries = cells.flatMap((cell) => {
    const weight = weightIn(cell)
    return cell.map((value) => ({ value, weight }))
  })
  entries.sort((one, other) => (one.value < other.value ? -1 : one.value > other.value ? 1 : 0))
  const before = new Float64Array(entries.length)
  let sum = 0
  entries.forEach(({ weight }, index) => {
    before[index] = sum
    sum += weight
  })
  return {
    values: entries.map(({ value }) => value),
    weights: Float64Array.from(entries, ({ weight }) => weight),
    before,
  }
}

function rangeOf<T>({ minus }: Whole<T>, { values }: Pool<T>): T {
  return minus(values.at(-1)!, values[0]!)
}

function pairsUpTo<T>({ minus }: Whole<T>, { values }: Pool<T>, x: T): number {
  let pairs = 0
  let low = 0
  for (let high = 0; high < values.length; high += 1) {
    while (minus(values[high]!, values[low]!) > x) low += 1
    pairs += high - low
  }
  return pairs
}

function weightUpTo<T>({ minus }: Whole<T>, { values, weights, before }: Pool<T>, x: T): number {
  let weight = 0
  let low = 0
  for (let high = 0; high < values.length; high += 1) {
    while (minus(values[high]!, values[low]!) > x) low += 1
    weight += weights[high]! * (before[high]! - before[low]!)
  }
  return weight
}
