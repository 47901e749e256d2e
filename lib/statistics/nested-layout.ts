import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The results of one material as a tree: laboratory, then each inner level,
 * then the single result.
 *
 * Labels inside a level repeat from parent to parent (day "1" of one laboratory
 * is not day "1" of another), so a group is identified by its whole path.
 *
 * Only the levels that split something are kept as strata. A level in which
 * every parent has one child carries no information of its own (0 degrees of
 * freedom) and has no stratum. Where no innermost group holds two results, the
 * innermost level that does split something takes the place of the replicate:
 * its stratum is the residual, and `confounded` names it.
 */
export type NestedObservation = {
  /** The laboratory, then one label per inner level, outermost first. */
  path: readonly string[]
  /** The result, as its difference from the material's exact offset. */
  deviation: number
}

export type Stratum = {
  source: string
  /** For each observation, the group it falls in. */
  groupOf: Int32Array
  /** For each group, one observation that belongs to it. */
  firstMember: Int32Array
  size: Float64Array
  mean: Float64Array
}

export type NestedLayout = {
  deviations: Float64Array
  /** Mean of all results, as a deviation. */
  mean: number
  /** Strata with degrees of freedom, outermost first; the last one is `residual`. */
  strata: readonly Stratum[]
  /** All named levels, outermost first, whether or not they have a stratum. */
  levels: readonly string[]
  confounded: string | null
}

/** The innermost source of variation in every layout, whatever it is called outside. */
export const RESIDUAL = 'residual'

/**
 * Lets pass a layout in which some results differ by the replicate alone, and one in which no laboratory holds two
 * results: `repeatability` says why there is none.
 *
 * @throws {NotComputable} `confounded` where an inner level stands in the place of the replicate.
 */
export function requireReplicate({ confounded, levels }: NestedLayout): void {
  if (confounded === null || confounded === levels[0]) return
  throw new NotComputable(
    'confounded',
    `No ${confounded} holds two results, so repeatability cannot be told from it.`,
  )
}

/**
 * Sorts the results of one material into the tree of its levels.
 *
 * Shape: `levels` from the laboratory inwards, without the replicate; each path holds one label for each of them.
 * Means are deviations in the unit of the results. Nothing is refused: without results, or with one alone, there is
 * no stratum, and `nestedAnova` says why.
 *
 * Source: ISO 5725-3 for the layout.
 */
export function buildNestedLayout(
  levels: readonly string[],
  observations: readonly NestedObservation[],
): NestedLayout {
  const deviations = Float64Array.from(observations, ({ deviation }) => deviation)
  const named: Stratum[] = []
  levels.forEach((source, level) => {
    const outer = named.at(-1)
    const keys = observations.map(({ path }, index) => `${outer?.groupOf[index] ?? 0} ${path[level]}`)
    named.push(stratum(source, keys, deviations))
  })
  const single = stratumOfSingles(deviations)

  const splitting: Stratum[] = []
  let groupsAbove = 1
  for (const candidate of [...named, single]) {
    if (candidate.size.length > groupsAbove) splitting.push(candidate)
    groupsAbove = Math.max(groupsAbove, candidate.size.length)
  }

  const innermost = splitting.at(-1)
  const confounded = innermost !== undefined && innermost.source !== RESIDUAL ? innermost.source : null
  const strata = splitting.map((one) => (one === innermost ? { ...one, source: RESIDUAL } : one))

  return { deviations, mean: meanOf(deviations), strata, levels, confounded }
}

function stratum(source: string, keys: readonly string[], deviations: Float64Array): Stratum {
  const indexOf = new Map<string, number>()
  const groupOf = new Int32Array(keys.length)
  const first: number[] = []
  const sums: number[] = []
  const sizes: number[] = []
  keys.forEach((key, observation) => {
    let group = indexOf.get(key)
    if (group === undefined) {
      group = indexOf.size
      indexOf.set(key, group)
      first.push(observation)
      sums.push(0)
      sizes.push(0)
    }
    groupOf[observation] = group
    sums[group]! += deviations[observation]!
    sizes[group]! += 1
  })
  return {
    source,
    groupOf,
    firstMember: Int32Array.from(first),
    size: Float64Array.from(sizes),
    mean: Float64Array.from(sums, (sum, group) => sum / sizes[group]!),
  }
}

/** Every result by itself. */
function stratumOfSingles(deviations: Float64Array): Stratum {
  const places = Int32Array.from(deviations, (_, index) => index)
  return {
    source: RESIDUAL,
    groupOf: places,
    firstMember: places,
    size: new Float64Array(deviations.length).fill(1),
    mean: deviations,
  }
}

function meanOf(values: Float64Array): number {
  let sum = 0
  for (const value of values) sum += value
  return values.length === 0 ? 0 : sum / values.length
}
