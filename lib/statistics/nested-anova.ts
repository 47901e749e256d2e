import { binaryScale } from '@/lib/statistics/binary-scale'
import { fUpperTail } from '@/lib/statistics/distributions/f'
import type { NestedLayout, Stratum } from '@/lib/statistics/nested-layout'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Nested analysis of variance for any depth and any imbalance.
 *
 * Sequential sums of squares, outermost level first; the expected mean squares
 * are those of random effects nested in one another, so the components follow
 * from a triangular system solved from the residual upwards. A negative
 * component keeps its raw value beside the 0 that is reported.
 *
 * Sources: ISO 5725-3; Searle, Casella & McCulloch 1992, Variance Components.
 */
export type AnovaRow = {
  source: string
  df: number
  ss: number
  ms: number
  /** Coefficient of each component in this row's expected mean square, by source. */
  ems: Record<string, number>
}

export type VarianceComponent = { source: string; raw: number; variance: number }

export type NestedAnova = { rows: readonly AnovaRow[]; components: readonly VarianceComponent[] }

export type NestedTest = {
  denominator: { ms: number; df: number; kind: 'exact' | 'Satterthwaite'; weights: Record<string, number> }
  f: number
  pValue: number
}

/**
 * The table of the analysis of variance and the variance components of a nested layout, outermost level first.
 *
 * Units: deviations in u; sums of squares, mean squares and components in u²; the coefficients of the expected mean
 * squares are pure numbers. A component is 0 where its estimate is negative, and `raw` keeps the estimate.
 *
 * @throws {NotComputable} `too-few-results` when nothing is left to compare; `out-of-range` when a sum of squares
 *   is no double to reckon with.
 *
 * Source: ISO 5725-3; Searle, Casella & McCulloch 1992.
 */
export function nestedAnova(layout: NestedLayout): NestedAnova {
  if (layout.strata.length === 0) {
    throw new NotComputable('too-few-results', 'An analysis of variance needs two results.')
  }
  const rows = anovaRows(layout)
  if (!rows.every(({ ss }) => ss === 0 || (ss > 1e-300 && ss < 1e300))) {
    throw new NotComputable(
      'out-of-range',
      'The results are too large or too small to be squared; change their unit.',
    )
  }
  return { rows, components: varianceComponents(rows) }
}

/**
 * The weights w for which Σ w_l E[MS_l] is the wanted combination of variance components, one a row, pure numbers.
 * A source that `wanted` does not name counts 0.
 *
 * The system is triangular: an outer component appears in no mean square further in, so the outermost weight is
 * settled first.
 */
export function weightsFor(rows: readonly AnovaRow[], wanted: Record<string, number>): number[] {
  const weights: number[] = []
  rows.forEach((row, level) => {
    let remaining = Object.hasOwn(wanted, row.source) ? wanted[row.source]! : 0
    for (let above = 0; above < level; above += 1)
      remaining -= weights[above]! * rows[above]!.ems[row.source]!
    const weight = remaining / row.ems[row.source]!
    weights.push(settle(weight))
  })
  return weights
}

/**
 * F test of one level against the combination of lower mean squares that has the same expectation when the
 * level's own component is 0. `source` is that of one of the rows.
 *
 * Variant: exact when one mean square alone is the denominator; otherwise synthesised, with Satterthwaite's degrees
 * of freedom, and `kind` says which. F and the weights are pure numbers, the denominator is in u².
 *
 * @throws {NotComputable} `residual` has no test; `no-denominator` when the combination is not positive.
 *
 * Source: Searle, Casella & McCulloch 1992.
 */
export function nestedTest(rows: readonly AnovaRow[], source: string): NestedTest {
  const level = rows.findIndex((row) => row.source === source)
  const tested = rows[level]!
  const below = rows.slice(level + 1)
  if (below.length === 0) throw new NotComputable('residual', 'The residual is tested against nothing.')

  const underNoEffect = Object.fromEntries(below.map((row) => [row.source, tested.ems[row.source]!]))
  const weights = weightsFor(below, underNoEffect)
  const scale = binaryScale(below.map((row, index) => weights[index]! * row.ms))
  let sum = 0
  let spread = 0
  below.forEach((row, index) => {
    const part = (weights[index]! * row.ms) / scale
    sum += part
    spread += part ** 2 / row.df
  })
  const ms = sum * scale
  if (!(ms > 0)) {
    throw new NotComputable('no-denominator', 'The mean square to test against is not positive.')
  }

  const used = weights.filter((weight) => weight !== 0)
  const exact = used.length === 1 && used[0] === 1
  const df = exact ? below[weights.indexOf(1)]!.df : sum ** 2 / spread
  const f = tested.ms / ms
  return {
    denominator: {
      ms,
      df,
      kind: exact ? 'exact' : 'Satterthwaite',
      weights: Object.fromEntries(below.map((row, index) => [row.source, weights[index]!])),
    },
    f,
    pValue: fUpperTail(f, tested.df, df),
  }
}

function anovaRows(layout: NestedLayout): AnovaRow[] {
  const { strata } = layout
  const sums = strata.map((inner) => strata.map((outer) => sizeSum(outer, inner)))
  const wholeSums = strata.map((inner) => sizeSumOfWhole(inner, layout.deviations.length))

  return strata.map((stratum, level) => {
    const above = level === 0 ? undefined : strata[level - 1]!
    const df = stratum.size.length - (above?.size.length ?? 1)
    const ss = betweenSumOfSquares(layout, stratum, above)
    const coefficients = strata.map((_, inner) => {
      const outside = above === undefined ? wholeSums[inner]! : sums[inner]![level - 1]!
      return inner < level ? 0 : inner === strata.length - 1 ? 1 : (sums[inner]![level]! - outside) / df
    })
    // A level may be called __proto__: made from entries it is a key like any other.
    const ems = Object.fromEntries(strata.map(({ source }, inner) => [source, coefficients[inner]!]))
    return { source: stratum.source, df, ss, ms: ss / df, ems }
  })
}

/** Σ over outer groups g of (1/N_g) Σ over its inner groups d of N_d². */
function sizeSum(outer: Stratum, inner: Stratum): number {
  let sum = 0
  for (let group = 0; group < inner.size.length; group += 1)
    sum += inner.size[group]! ** 2 / outer.size[outer.groupOf[inner.firstMember[group]!]!]!
  return sum
}

function sizeSumOfWhole(inner: Stratum, results: number): number {
  let sum = 0
  for (const size of inner.size) sum += size ** 2
  return sum / results
}

function betweenSumOfSquares(layout: NestedLayout, stratum: Stratum, above: Stratum | undefined): number {
  let ss = 0
  let largest = 0
  for (let group = 0; group < stratum.mean.length; group += 1) {
    const mean = stratum.mean[group]!
    const parent =
      above === undefined ? layout.mean : above.mean[above.groupOf[stratum.firstMember[group]!]!]!
    ss += stratum.size[group]! * (mean - parent) ** 2
    largest = Math.max(largest, Math.abs(mean), Math.abs(parent))
  }
  // Means that are equal as fractions can differ in their last bit. What is
  // left of such a difference is no scatter, and must not pass for some.
  const rounding = layout.deviations.length * (4 * Number.EPSILON * largest) ** 2
  return ss <= rounding ? 0 : ss
}

function varianceComponents(rows: readonly AnovaRow[]): VarianceComponent[] {
  const raw = new Map<string, number>()
  for (let level = rows.length - 1; level >= 0; level -= 1) {
    const row = rows[level]!
    let rest = row.ms
    for (let inner = level + 1; inner < rows.length; inner += 1) {
      const source = rows[inner]!.source
      rest -= row.ems[source]! * raw.get(source)!
    }
    raw.set(row.source, rest / row.ems[row.source]!)
  }
  return rows.map(({ source }) => ({
    source,
    raw: raw.get(source)!,
    variance: Math.max(0, raw.get(source)!),
  }))
}

/** A weight that is 0 or 1 but for its last bits is 0 or 1: balance must be recognised as such. */
function settle(weight: number): number {
  if (Math.abs(weight) < 1e-12) return 0
  if (Math.abs(weight - 1) < 1e-12) return 1
  return weight
}
