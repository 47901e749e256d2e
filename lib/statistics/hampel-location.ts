import { median } from '@/lib/statistics/median'

/**
 * Hampel's estimate of location for a given spread: the root of Σ ψ((y − x)/s*) that lies nearest to the median; the
 * median itself when two are equally near. The sum is made of straight pieces, so every root is found exactly,
 * without iteration.
 *
 * `values` and `spread` (above 0) in one unit, and so the answer; values from any origin, in any order.
 *
 * @throws {RangeError} without a value.
 *
 * Source: ISO 13528, Annex C.5; Hampel's three-part ψ with corners at 1.5, 3 and 4.5.
 */
export function hampelLocation(values: readonly number[], spread: number): number {
  const middle = median(values)
  const nodes = cornersOf(values, spread)
  const sumAt = remembering((node: number) => {
    let sum = 0
    for (const value of values) sum += influence((value - nodes[node]!) / spread)
    return sum
  })
  const signAt = signsOfSum(values, { middle, spread, nodes })
  /** Where the sum is 0 at a node or between it and the one before. */
  const rootAt = (node: number): number | null => {
    const sign = signAt(node)
    if (sign !== 0 && (node === 0 || sign === signAt(node - 1))) return null
    const here = sumAt(node)
    if (Math.abs(here) < ZERO) return nodes[node]!
    if (node === 0 || !(here * sumAt(node - 1) < 0) || Math.abs(sumAt(node - 1)) < ZERO) return null
    const before = nodes[node - 1]!
    return before + ((nodes[node]! - before) * sumAt(node - 1)) / (sumAt(node - 1) - here)
  }

  // Nodes are visited outwards from the median, and no further than needed.
  const roots: number[] = []
  let nearest = Infinity
  const take = (node: number): void => {
    const root = rootAt(node)
    if (root === null) return
    roots.push(root)
    nearest = Math.min(nearest, Math.abs(root - middle))
  }
  const start = nodes.findIndex((node) => node >= middle)
  const reach = (): number => nearest + 1e-12 * spread
  // A root lies between a node and the one before it, so a step up looks at the node before and a step down at its own.
  for (let node = start; node < nodes.length && (nodes[node - 1] ?? -Infinity) - middle <= reach(); node += 1)
    take(node)
  for (let node = start - 1; node >= 0 && middle - nodes[node]! <= reach(); node -= 1) take(node)

  const near = roots.filter((root) => Math.abs(root - middle) - nearest <= 1e-12 * spread)
  const [lowest, highest] = [Math.min(...near), Math.max(...near)]
  return highest - lowest > 1e-12 * spread ? middle : near[0]!
}

/** Where the sum of influences bends, in ascending order and each once. */
function cornersOf(values: readonly number[], spread: number): Float64Array {
  const corners = new Float64Array(values.length * CORNERS.length)
  values.forEach((value, index) =>
    CORNERS.forEach((corner, place) => (corners[index * CORNERS.length + place] = value + corner * spread)),
  )
  return corners.sort().filter((corner, place, all) => place === 0 || corner !== all[place - 1])
}

/**
 * The sign of the sum of influences at a node, 0 where rounding could have turned it. From sums of the sorted values it
 * costs a few searches and not a walk through all of them.
 */
function signsOfSum(
  values: readonly number[],
  { middle, spread, nodes }: { middle: number; spread: number; nodes: Float64Array },
): (node: number) => number {
  const sorted = Float64Array.from(values, (value) => (value - middle) / spread).sort()
  const sums = new Float64Array(sorted.length + 1)
  let size = 0
  for (let at = 0; at < sorted.length; at += 1) {
    sums[at + 1] = sums[at]! + sorted[at]!
    size += Math.abs(sorted[at]!)
  }
  return remembering((node: number) => {
    const x = (nodes[node]! - middle) / spread
    const [a, b, c, d, e, f] = CORNERS.map((corner) => placeOf(sorted, x + corner)) as Six
    const distances = (from: number, to: number): number => sums[to]! - sums[from]! - x * (to - from)
    const pull =
      -4.5 * (b - a) -
      distances(a, b) -
      1.5 * (c - b) +
      distances(c, d) +
      1.5 * (e - d) +
      4.5 * (f - e) -
      distances(e, f)
    const doubt = 1e-9 + 1e-12 * (size + Math.abs(x) * sorted.length)
    return Math.abs(pull) <= doubt ? 0 : Math.sign(pull)
  })
}

type Six = [number, number, number, number, number, number]

/** How many of the sorted values lie below the bound. */
function placeOf(sorted: Float64Array, bound: number): number {
  let [from, to] = [0, sorted.length]
  while (from < to) {
    const middle = (from + to) >> 1
    if (sorted[middle]! < bound) from = middle + 1
    else to = middle
  }
  return from
}

const CORNERS = [-4.5, -3, -1.5, 1.5, 3, 4.5]
const ZERO = 1e-12

/** Hampel's three-part influence: rising to 1.5, level to 3, back to 0 at 4.5. */
function influence(distanceInSpreads: number): number {
  const size = Math.abs(distanceInSpreads)
  const pull = size <= 1.5 ? size : size <= 3 ? 1.5 : size <= 4.5 ? 4.5 - size : 0
  return distanceInSpreads < 0 ? -pull : pull
}

function remembering<Value>(compute: (index: number) => Value): (index: number) => Value {
  const known = new Map<number, Value>()
  return (index) => {
    const found = known.get(index)
    if (found !== undefined) return found
    const value = compute(index)
    known.set(index, value)
    return value
  }
}
