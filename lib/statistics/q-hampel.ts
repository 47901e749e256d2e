import { normalQuantile } from '@/lib/statistics/distributions/normal'
import { median } from '@/lib/statistics/median'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Q method for spread and Hampel's estimate for location.
 *
 * The Q method reads a quantile off all pairwise differences, so it matters
 * whether two differences are equal. They are taken between integers: results at
 * a common decimal scale, cell means at that scale times the least common
 * multiple of the cell sizes. In floating point equal differences would fall
 * apart by a last bit and the answer would move by per cents.
 *
 * Source: ISO 13528, Annex C.5.
 */

/** Results of one material: integers at a common decimal scale, one list a cell. */
export type IntegerCells = readonly (readonly bigint[])[]

/** Steps of the last decimal, as they stand in the data: 10^−scale. */
export type DecimalStep = number

/**
 * Q method on the cell means, each counted once.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3; `all-equal`.
 */
export function qOfCellMeans(cells: IntegerCells, step: DecimalStep): number {
  const count = cells.length
  if (count < 3) throw new NotComputable('too-few-laboratories', 'The Q method needs three laboratories.')
  const multiple = cells.reduce((common, cell) => leastCommonMultiple(common, BigInt(cell.length)), 1n)
  const means = cells.map((cell) => [
    cell.reduce((sum, one) => sum + one, 0n) * (multiple / BigInt(cell.length)),
  ])
  const differences = differencesBetween(means, 2 / (count * (count - 1)))
  return (spreadFrom(differences, BETWEEN) / Number(multiple)) * step
}

/**
 * Q method for reproducibility on single results: the pairs of different cells,
 * every pair of cells counted alike.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `all-equal`.
 */
export function qReproducibility(cells: IntegerCells, step: DecimalStep): number {
  const count = cells.length
  if (count < 2) throw new NotComputable('too-few-laboratories', 'Two laboratories are needed.')
  return spreadFrom(differencesBetween(cells, 2 / (count * (count - 1))), BETWEEN) * step
}

/**
 * Q method for repeatability on single results: the pairs inside a cell, every
 * cell of two or more results counted alike.
 *
 * @throws {NotComputable} `no-replication`; `all-equal`.
 */
export function qRepeatability(cells: IntegerCells, step: DecimalStep): number {
  const replicated = cells.filter((cell) => cell.length >= 2)
  if (replicated.length === 0) throw new NotComputable('no-replication', 'No cell holds two results.')
  return spreadFrom(differencesWithin(replicated), WITHIN) * step
}

/**
 * Hampel's estimate of location for a given spread: the root of Σ ψ((y − x)/s*)
 * that lies nearest to the median. The sum is made of straight pieces, so every
 * root is found exactly, without iteration.
 */
export function hampelLocation(values: readonly number[], spread: number): number {
  const nodes = [...new Set(values.flatMap((value) => CORNERS.map((corner) => value + corner * spread)))]
  nodes.sort((one, other) => one - other)
  const sums = nodes.map((node) => values.reduce((sum, value) => sum + influence((value - node) / spread), 0))

  const roots: number[] = []
  nodes.forEach((node, index) => {
    const here = sums[index]!
    if (Math.abs(here) < ZERO) roots.push(node)
    else if (index > 0 && here * sums[index - 1]! < 0 && Math.abs(sums[index - 1]!) >= ZERO) {
      const before = nodes[index - 1]!
      roots.push(before + ((node - before) * sums[index - 1]!) / (sums[index - 1]! - here))
    }
  })

  const middle = median(values)
  const nearest = Math.min(...roots.map((root) => Math.abs(root - middle)))
  const near = roots.filter((root) => Math.abs(root - middle) - nearest <= 1e-12 * spread)
  const [lowest, highest] = [Math.min(...near), Math.max(...near)]
  return highest - lowest > 1e-12 * spread ? middle : near[0]!
}

const CORNERS = [-4.5, -3, -1.5, 1.5, 3, 4.5]
const ZERO = 1e-12

/** Hampel's three-part influence: rising to 1.5, level to 3, back to 0 at 4.5. */
function influence(distanceInSpreads: number): number {
  const size = Math.abs(distanceInSpreads)
  const pull = size <= 1.5 ? size : size <= 3 ? 1.5 : size <= 4.5 ? 4.5 - size : 0
  return distanceInSpreads < 0 ? -pull : pull
}

/** Differences that count alike. */
type DifferenceClass = { weight: number; sizes: Float64Array }

/** Which quantile of the differences is read, and what it is in a normal distribution. */
type Reading = { share: number; probability: number; probabilityOfTies: number }

const BETWEEN: Reading = { share: 0.25, probability: 0.625, probabilityOfTies: 0.375 }
const WITHIN: Reading = { share: 0.5, probability: 0.75, probabilityOfTies: 0.25 }

/** All pairs of results of different cells; a pair of cells weighs `ofCells` in all. */
function differencesBetween(cells: IntegerCells, ofCells: number): DifferenceClass[] {
  const distance = exactDistance(cells.flat())
  const starts = startsOf(cells)
  return byWeight((add) => {
    cells.forEach((cell, index) => {
      for (let other = index + 1; other < cells.length; other += 1) {
        const size = cells[other]!.length
        const weight = ofCells / (cell.length * size)
        for (let one = 0; one < cell.length; one += 1) {
          for (let two = 0; two < size; two += 1)
            add(weight, distance(starts[index]! + one, starts[other]! + two))
        }
      }
    })
  })
}

/** All pairs of results inside a cell; every cell weighs alike. */
function differencesWithin(cells: IntegerCells): DifferenceClass[] {
  const distance = exactDistance(cells.flat())
  const starts = startsOf(cells)
  return byWeight((add) => {
    cells.forEach((cell, index) => {
      const weight = 2 / (cells.length * cell.length * (cell.length - 1))
      for (let one = 0; one < cell.length; one += 1) {
        for (let two = one + 1; two < cell.length; two += 1) {
          add(weight, distance(starts[index]! + one, starts[index]! + two))
        }
      }
    })
  })
}

/**
 * Distance of two of the numbers by their places. Within 2^53 of each other they
 * are compared as doubles, which is exact; further apart each difference is
 * rounded after it was taken, so that equal ones still come out equal.
 */
function exactDistance(numbers: readonly bigint[]): (one: number, other: number) => number {
  const least = numbers.reduce((low, number) => (number < low ? number : low), numbers[0]!)
  const most = numbers.reduce((high, number) => (number > high ? number : high), numbers[0]!)
  if (most - least <= BigInt(Number.MAX_SAFE_INTEGER)) {
    const shifted = Float64Array.from(numbers, (number) => Number(number - least))
    return (one, other) => Math.abs(shifted[one]! - shifted[other]!)
  }
  return (one, other) => Math.abs(Number(numbers[one]! - numbers[other]!))
}

function startsOf(cells: IntegerCells): number[] {
  let next = 0
  return cells.map((cell) => {
    next += cell.length
    return next - cell.length
  })
}

function byWeight(collect: (add: (weight: number, size: number) => void) => void): DifferenceClass[] {
  const classes = new Map<number, number[]>()
  collect((weight, size) => {
    const known = classes.get(weight)
    if (known === undefined) classes.set(weight, [size])
    else known.push(size)
  })
  return [...classes].map(([weight, sizes]) => ({ weight, sizes: Float64Array.from(sizes).sort() }))
}

function spreadFrom(classes: readonly DifferenceClass[], reading: Reading): number {
  if (classes.every(({ sizes }) => sizes.at(-1) === 0)) {
    throw new NotComputable('all-equal', 'All the values are equal.')
  }
  const ties = classes.reduce(
    (sum, { weight, sizes }) => sum + weight * sizes.filter((size) => size === 0).length,
    0,
  )
  const target = reading.share + (1 - reading.share) * ties
  const normal = Math.SQRT2 * normalQuantile(reading.probability + reading.probabilityOfTies * ties)

  let before = { size: 0, share: 0, cumulated: 0 }
  for (const { size, cumulated } of inOrder(classes)) {
    const share = size === 0 ? 0 : (before.cumulated + cumulated) / 2
    if (share >= target) {
      return (
        (before.size + ((size - before.size) * (target - before.share)) / (share - before.share)) / normal
      )
    }
    before = { size, share, cumulated }
  }
  // The polygon ends half a step short of 1; with nearly all differences equal
  // to 0 the target lies above its end.
  throw new NotComputable('all-equal', 'Too many of the values are equal.')
}

/** The distinct sizes in ascending order, each with the share of differences up to it. */
function* inOrder(classes: readonly DifferenceClass[]): Generator<{ size: number; cumulated: number }> {
  const places = classes.map(() => 0)
  let cumulated = 0
  for (;;) {
    let size = Infinity
    classes.forEach(({ sizes }, index) => {
      const head = sizes[places[index]!]
      if (head !== undefined && head < size) size = head
    })
    if (size === Infinity) return
    classes.forEach(({ weight, sizes }, index) => {
      while (sizes[places[index]!] === size) {
        cumulated += weight
        places[index]! += 1
      }
    })
    yield { size, cumulated }
  }
}

function leastCommonMultiple(one: bigint, other: bigint): bigint {
  let [a, b] = [one, other]
  while (b !== 0n) [a, b] = [b, a % b]
  return (one / a) * other
}
