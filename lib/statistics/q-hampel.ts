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
  if (cells.length < 3)
    throw new NotComputable('too-few-laboratories', 'The Q method needs three laboratories.')
  const multiple = cells.reduce((common, cell) => leastCommonMultiple(common, BigInt(cell.length)), 1n)
  const means = cells.map(
    (cell) => cell.reduce((sum, one) => sum + one, 0n) * (multiple / BigInt(cell.length)),
  )
  const differences: WeightedDifference[] = []
  const weight = 2 / (cells.length * (cells.length - 1))
  means.forEach((one, index) => {
    for (let other = index + 1; other < means.length; other += 1) {
      differences.push({ size: distance(one, means[other]!), weight })
    }
  })
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
  const differences: WeightedDifference[] = []
  cells.forEach((cell, index) => {
    for (const other of cells.slice(index + 1)) {
      const weight = 2 / (count * (count - 1) * cell.length * other.length)
      for (const one of cell) for (const two of other) differences.push({ size: distance(one, two), weight })
    }
  })
  return spreadFrom(differences, BETWEEN) * step
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
  const differences: WeightedDifference[] = []
  for (const cell of replicated) {
    const weight = 2 / (replicated.length * cell.length * (cell.length - 1))
    cell.forEach((one, index) => {
      for (const other of cell.slice(index + 1)) differences.push({ size: distance(one, other), weight })
    })
  }
  return spreadFrom(differences, WITHIN) * step
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

type WeightedDifference = { size: bigint; weight: number }

/** Which quantile of the differences is read, and what it is in a normal distribution. */
type Reading = { share: number; probability: number; probabilityOfTies: number }

const BETWEEN: Reading = { share: 0.25, probability: 0.625, probabilityOfTies: 0.375 }
const WITHIN: Reading = { share: 0.5, probability: 0.75, probabilityOfTies: 0.25 }

function spreadFrom(differences: readonly WeightedDifference[], reading: Reading): number {
  const steps = cumulate(differences)
  if (steps.at(-1)!.size === 0n) throw new NotComputable('all-equal', 'All the values are equal.')
  const ties = steps[0]!.size === 0n ? steps[0]!.cumulated : 0
  const target = reading.share + (1 - reading.share) * ties
  const normal = Math.SQRT2 * normalQuantile(reading.probability + reading.probabilityOfTies * ties)

  let beforeSize = 0
  let beforeShare = 0
  let beforeCumulated = 0
  for (const { size, cumulated } of steps) {
    const share = size === 0n ? 0 : (beforeCumulated + cumulated) / 2
    if (share >= target) {
      const reached =
        beforeSize + ((Number(size) - beforeSize) * (target - beforeShare)) / (share - beforeShare)
      return reached / normal
    }
    beforeSize = Number(size)
    beforeShare = share
    beforeCumulated = cumulated
  }
  // The polygon ends half a step short of 1; with nearly all differences equal
  // to 0 the target lies above its end.
  throw new NotComputable('all-equal', 'Too many of the values are equal.')
}

function cumulate(differences: readonly WeightedDifference[]): { size: bigint; cumulated: number }[] {
  const sorted = [...differences].sort((one, other) =>
    one.size < other.size ? -1 : one.size > other.size ? 1 : 0,
  )
  const steps: { size: bigint; cumulated: number }[] = []
  let cumulated = 0
  for (const { size, weight } of sorted) {
    cumulated += weight
    const last = steps.at(-1)
    if (last !== undefined && last.size === size) last.cumulated = cumulated
    else steps.push({ size, cumulated })
  }
  return steps
}

function distance(one: bigint, other: bigint): bigint {
  return one > other ? one - other : other - one
}

function leastCommonMultiple(one: bigint, other: bigint): bigint {
  let [a, b] = [one, other]
  while (b !== 0n) [a, b] = [b, a % b]
  return (one / a) * other
}
