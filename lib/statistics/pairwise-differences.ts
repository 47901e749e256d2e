import type { WholeNumbers } from '@/lib/statistics/decimal'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Results of one material as whole numbers at a common decimal scale, the cells behind one another: cell i holds those from
 * `starts[i]` up to, and without, `starts[i + 1]`, one at least.
 */
export type IntegerCells = { readonly units: WholeNumbers; readonly starts: Int32Array }

/** A corner of the polygon G: halfway up a jump of the distribution of differences. */
type Corner = { size: number; share: number }

/**
 * The sizes of many differences, seen through their distribution. There are as many as the square of the results, so they
 * are counted along the sorted values and never listed. More than 10^200 steps are refused (`out-of-range`).
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
  const numbers = asNumbers(cells.units)
  return numbers === null
    ? betweenCells(BIGINTS, cells.units as readonly bigint[], cells.starts)
    : betweenCells(NUMBERS, numbers, cells.starts)
}

/**
 * Differences of results of one cell, every cell counted alike; sizes and ties as {@link differencesBetween}. Each cell
 * holds two results or more.
 *
 * Source: ISO 13528, Annex C.5.
 */
export function differencesWithin(cells: IntegerCells): Differences {
  const numbers = asNumbers(cells.units)
  return numbers === null
    ? withinCells(BIGINTS, cells.units as readonly bigint[], cells.starts)
    : withinCells(NUMBERS, numbers, cells.starts)
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

/**
 * Differences of more steps are not looked at: a search among them goes through every binary digit, and of one result
 * such as 1e-2000 among ordinary ones there are thousands.
 */
const MOST_STEPS = 10n ** 200n

/** `out-of-range`, for results that are written to more places than their differences can be compared in. */
export function tooManyPlaces(): NotComputable {
  return new NotComputable(
    'out-of-range',
    'The results have too many places for their differences to be compared.',
  )
}

/** Doubles that differ as the whole numbers do, or `null` where they lie too far apart. */
function asNumbers(units: WholeNumbers): Float64Array | null {
  if (units instanceof Float64Array) return units
  let [least, most] = [units[0]!, units[0]!]
  for (const unit of units) {
    if (unit < least) least = unit
    if (unit > most) most = unit
  }
  if (most - least > MOST_STEPS) throw tooManyPlaces()
  if (most - least > BigInt(Number.MAX_SAFE_INTEGER)) return null
  return Float64Array.from(units, (unit) => Number(unit - least))
}

/** The cells with the values of each in ascending order. */
type SortedCells<T> = { values: ArrayLike<T>; starts: Int32Array }

/** Values in ascending order, and for each the weights of those before it added up. */
type Pool<T> = { values: ArrayLike<T>; weights: Float64Array; before: Float64Array }

function betweenCells<T>(whole: Whole<T>, units: ArrayLike<T>, starts: Int32Array): Differences {
  const count = starts.length - 1
  const cells = sortedCells(units, starts)
  const pool = weightedPool(units, starts)
  const pairsOfCells = (count * (count - 1)) / 2
  // Differences inside a cell do not count.
  const pairs = (x: T): number => {
    let sum = pairsUpTo(whole, pool.values, { from: 0, to: pool.values.length }, x)
    for (let cell = 0; cell < count; cell += 1)
      sum -= pairsUpTo(whole, cells.values, { from: starts[cell]!, to: starts[cell + 1]! }, x)
    return sum
  }
  const weight = (x: T): number => {
    let sum = weightUpTo(whole, pool, x)
    for (let cell = 0; cell < count; cell += 1) {
      const [from, to] = [starts[cell]!, starts[cell + 1]!]
      sum -= pairsUpTo(whole, cells.values, { from, to }, x) / (to - from) ** 2
    }
    return sum / pairsOfCells
  }
  const size = commonSize(starts)
  // Whole counts keep a share exact where every pair weighs alike.
  const share = size === null ? weight : (x: T): number => pairs(x) / (pairsOfCells * size ** 2)
  const range = whole.minus(pool.values[pool.values.length - 1]!, pool.values[0]!)
  return distribution({ whole, range, pairs, share })
}

function withinCells<T>(whole: Whole<T>, units: ArrayLike<T>, starts: Int32Array): Differences {
  const count = starts.length - 1
  const { values } = sortedCells(units, starts)
  const pairsIn = (cell: number): number => {
    const length = starts[cell + 1]! - starts[cell]!
    return (length * (length - 1)) / 2
  }
  const over = (of: (cell: number) => number): number => {
    let sum = 0
    for (let cell = 0; cell < count; cell += 1) sum += of(cell)
    return sum
  }
  const pairsOf = (cell: number, x: T): number =>
    pairsUpTo(whole, values, { from: starts[cell]!, to: starts[cell + 1]! }, x)
  const pairs = (x: T): number => over((cell) => pairsOf(cell, x))
  const isBalanced = commonSize(starts) !== null
  const allPairs = over(pairsIn)
  const share = (x: T): number =>
    isBalanced ? pairs(x) / allPairs : over((cell) => pairsOf(cell, x) / pairsIn(cell)) / count
  let range = whole.minus(whole.one, whole.one)
  for (let cell = 0; cell < count; cell += 1) {
    const own = whole.minus(values[starts[cell + 1]! - 1]!, values[starts[cell]!]!)
    if (own > range) range = own
  }
  return distribution({ whole, range, pairs, share })
}

function commonSize(starts: Int32Array): number | null {
  const size = starts[1]! - starts[0]!
  for (let cell = 1; cell < starts.length - 1; cell += 1)
    if (starts[cell + 1]! - starts[cell]! !== size) return null
  return size
}

function distribution<T>(one: {
  whole: Whole<T>
  /** The largest difference. */
  range: T
  pairs: (x: T) => number
  share: (x: T) => number
}): Differences {
  const { whole, range, pairs, share } = one
  const { minus, plus, half, one: unit } = whole
  const nothing = minus(unit, unit)
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
  /**
   * The largest difference up to x, above 0. Where the distribution stands at the target over a stretch, the rounding of a
   * sum of weights can let it pass there at a number that is no difference.
   */
  const difference = (x: T): T => {
    const upTo = pairs(x)
    return pairs(minus(x, unit)) === upTo ? smallest(nothing, x, (y) => pairs(y) === upTo) : x
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
      const passing = difference(smallest(nothing, range, (x) => share(x) >= target))
      const at = corner(passing)
      if (at.share >= target) return { from: corner(below(passing)), to: at }
      if (pairs(passing) === allPairs) return null
      return { from: at, to: corner(above(passing)) }
    },
  }
}

function sortedCells<T>(units: ArrayLike<T>, starts: Int32Array): SortedCells<T> {
  const values = units instanceof Float64Array ? (units.slice() as unknown as T[]) : Array.from(units)
  for (let cell = 0; cell < starts.length - 1; cell += 1)
    sortSpan(values, { from: starts[cell]!, to: starts[cell + 1]! })
  return { values, starts }
}

/** Cells are small, and for a few values a call of the general sort costs more than the sorting. */
const FEW = 16

function sortSpan<T>(values: T[], { from, to }: Span): void {
  if (to - from > FEW) {
    const sorted = values.slice(from, to).sort((one, other) => (one < other ? -1 : one > other ? 1 : 0))
    for (let at = from; at < to; at += 1) values[at] = sorted[at - from]!
    return
  }
  for (let at = from + 1; at < to; at += 1) {
    const value = values[at]!
    let place = at
    while (place > from && values[place - 1]! > value) {
      values[place] = values[place - 1]!
      place -= 1
    }
    values[place] = value
  }
}

/** Every value weighs one over the size of its cell. */
function weightedPool<T>(units: ArrayLike<T>, starts: Int32Array): Pool<T> {
  const count = units.length
  const weightOf = new Float64Array(count)
  for (let cell = 0; cell < starts.length - 1; cell += 1)
    weightOf.fill(1 / (starts[cell + 1]! - starts[cell]!), starts[cell], starts[cell + 1])
  if (units instanceof Float64Array && commonSize(starts) !== null) {
    return {
      values: units.slice().sort() as unknown as ArrayLike<T>,
      weights: weightOf,
      before: sums(weightOf),
    }
  }
  const order = Uint32Array.from({ length: count }, (_, at) => at)
  order.sort((one, other) => (units[one]! < units[other]! ? -1 : units[one]! > units[other]! ? 1 : 0))
  const weights = Float64Array.from(order, (at) => weightOf[at]!)
  return { values: Array.from(order, (at) => units[at]!), weights, before: sums(weights) }
}

/** For each value the sum of those before it. */
function sums(values: Float64Array): Float64Array {
  const before = new Float64Array(values.length)
  for (let at = 1; at < values.length; at += 1) before[at] = before[at - 1]! + values[at - 1]!
  return before
}

type Span = { from: number; to: number }

function pairsUpTo<T>({ minus }: Whole<T>, values: ArrayLike<T>, { from, to }: Span, x: T): number {
  let pairs = 0
  let low = from
  for (let high = from; high < to; high += 1) {
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
