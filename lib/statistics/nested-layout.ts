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

/**
 * The same column by column: for each level the code of every observation's label, numbered from 0 in the order of
 * their first appearance.
 */
export type NestedTable = { codes: readonly Int32Array[]; deviations: Float64Array }

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
 * Shape: `levels` from the laboratory inwards, without the replicate; the table has one column of codes for each.
 * Means are deviations in the unit of the results. Nothing is refused: without results, or with one alone, there is
 * no stratum, and `nestedAnova` says why.
 *
 * Source: ISO 5725-3 for the layout.
 */
export function buildNestedLayout(
  levels: readonly string[],
  { codes, deviations }: NestedTable,
): NestedLayout {
  const named: Stratum[] = []
  levels.forEach((source, level) => {
    const groupOf = groupsInside(named.at(-1)?.groupOf, codes[level]!)
    named.push(stratum(source, groupOf, deviations))
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

/** Observations as columns; each path holds one label for each of `levels` levels. */
export function nestedTable(observations: readonly NestedObservation[], levels: number): NestedTable {
  return {
    codes: Array.from(
      { length: levels },
      (_, level) => codeLabels(observations.map(({ path }) => path[level]!)).codes,
    ),
    deviations: Float64Array.from(observations, ({ deviation }) => deviation),
  }
}

/** Labels numbered from 0 in the order of their first appearance. */
export function codeLabels(written: readonly string[]): { codes: Int32Array; labels: string[] } {
  const known = new Map<string, number>()
  const codes = new Int32Array(written.length)
  const labels: string[] = []
  for (let at = 0; at < written.length; at += 1) {
    const label = written[at]!
    // Results of one group mostly stand together.
    if (at > 0 && label === written[at - 1]) {
      codes[at] = codes[at - 1]!
      continue
    }
    let code = known.get(label)
    if (code === undefined) {
      code = labels.length
      known.set(label, code)
      labels.push(label)
    }
    codes[at] = code
  }
  return { codes, labels }
}

/** Numbers the groups of a level, in the order of their first observation; labels repeat from parent to parent. */
function groupsInside(parentOf: Int32Array | undefined, codes: Int32Array): Int32Array {
  if (parentOf === undefined) return codes
  let labels = 0
  for (let at = 0; at < codes.length; at += 1) labels = Math.max(labels, codes[at]! + 1)
  const known = new Map<number, number>()
  const groupOf = new Int32Array(codes.length)
  let [lastKey, lastGroup] = [-1, -1]
  for (let at = 0; at < codes.length; at += 1) {
    const key = parentOf[at]! * labels + codes[at]!
    if (key !== lastKey) {
      lastKey = key
      lastGroup = known.get(key) ?? known.size
      known.set(key, lastGroup)
    }
    groupOf[at] = lastGroup
  }
  return groupOf
}

function stratum(source: string, groupOf: Int32Array, deviations: Float64Array): Stratum {
  let groups = 0
  for (let at = 0; at < groupOf.length; at += 1) groups = Math.max(groups, groupOf[at]! + 1)
  const firstMember = new Int32Array(groups)
  const size = new Float64Array(groups)
  for (let at = 0; at < groupOf.length; at += 1) {
    const group = groupOf[at]!
    if (size[group] === 0) firstMember[group] = at
    size[group]! += 1
  }
  const mean = meansOfGroups({ groupOf, firstMember, size, deviations })
  return { source, groupOf, firstMember, size, mean }
}

/**
 * Reckoned from a result of each group and put right once, so that the mean of equal results is that result, and any other
 * off by no more than its last bits, however many there are: what rounding leaves must not pass for scatter.
 */
function meansOfGroups(one: {
  groupOf: Int32Array
  firstMember: Int32Array
  size: Float64Array
  deviations: Float64Array
}): Float64Array {
  const { groupOf, firstMember, size, deviations } = one
  const mean = Float64Array.from(firstMember, (member) => deviations[member]!)
  const rest = new Float64Array(mean.length)
  for (let pass = 0; pass < 2; pass += 1) {
    rest.fill(0)
    for (let at = 0; at < groupOf.length; at += 1)
      rest[groupOf[at]!]! += deviations[at]! - mean[groupOf[at]!]!
    for (let group = 0; group < mean.length; group += 1) mean[group]! += rest[group]! / size[group]!
  }
  return mean
}

/** Every result by itself. */
function stratumOfSingles(deviations: Float64Array): Stratum {
  const places = new Int32Array(deviations.length)
  for (let at = 0; at < places.length; at += 1) places[at] = at
  return {
    source: RESIDUAL,
    groupOf: places,
    firstMember: places,
    size: new Float64Array(deviations.length).fill(1),
    mean: deviations,
  }
}

/** 0 of nothing; reckoned as the means of groups are. */
export function meanOf(values: Float64Array): number {
  let mean = values[0] ?? 0
  for (let pass = 0; pass < 2 && values.length > 0; pass += 1) {
    let rest = 0
    for (const value of values) rest += value - mean
    mean += rest / values.length
  }
  return mean
}
