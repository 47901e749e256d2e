import { codesOfCells, type CellSummary, type CellTable } from '@/lib/statistics/cells'
import { meanOf, type NestedLayout, RESIDUAL, type Stratum } from '@/lib/statistics/nested-layout'

/**
 * What each laboratory contributes to one level of a nested layout: the
 * scatter, inside that laboratory, of the level's groups about their parents.
 *
 * `mean` and `n` are those of all the laboratory's results; `sd` and `df` those
 * of the level. For the residual this is the pooled innermost standard
 * deviation, on which k and Cochran's test rest.
 */
export type LevelSummaries = {
  /** The level's own name; for a residual that cannot be told from a named level, that level's. */
  source: string
  isReplicate: boolean
  laboratories: CellSummary[]
}

/**
 * What each laboratory shows at each level inside it that has degrees of freedom, outermost first. From these come h, k
 * and Cochran's test at the inner levels of a nested layout.
 *
 * Shape: `cells` holds the results in the order of the layout, one at least of each laboratory. Means are deviations in
 * unit u; `sd` is √MS_l(i), in u, where the laboratory has degrees of freedom at that level.
 *
 * Source: ISO 5725-3, the mean square of each level taken laboratory by laboratory.
 */
export function levelSummaries(layout: NestedLayout, cells: CellTable): LevelSummaries[] {
  const laboratoryOf = codesOfCells(cells)
  const wholes = wholeLaboratories(cells)
  const levels: LevelSummaries[] = []
  let above = laboratoryStratum(layout, wholes, laboratoryOf)
  for (const stratum of layout.strata) {
    const isLaboratory = stratum.source === layout.levels[0] || layout.confounded === layout.levels[0]
    if (!isLaboratory) {
      const isReplicate = stratum.source === RESIDUAL && layout.confounded === null
      levels.push({
        source: stratum.source === RESIDUAL ? (layout.confounded ?? RESIDUAL) : stratum.source,
        isReplicate,
        laboratories: insideLaboratories({ stratum, above, laboratoryOf, wholes }),
      })
    }
    above = stratum
  }
  return levels
}

/** Number and mean of all results of each laboratory, without a scatter. */
function wholeLaboratories({ laboratories, starts, deviations }: CellTable): CellSummary[] {
  return laboratories.map((laboratory, index) => {
    const [start, end] = [starts[index]!, starts[index + 1]!]
    return { laboratory, n: end - start, mean: meanOf(deviations.subarray(start, end)), sd: undefined, df: 0 }
  })
}

function laboratoryStratum(
  layout: NestedLayout,
  wholes: readonly CellSummary[],
  laboratoryOf: Int32Array,
): Stratum {
  const firstMember = new Int32Array(wholes.length)
  for (let member = laboratoryOf.length - 1; member >= 0; member -= 1)
    firstMember[laboratoryOf[member]!] = member
  return {
    source: layout.levels[0]!,
    groupOf: laboratoryOf,
    firstMember,
    size: Float64Array.from(wholes, ({ n }) => n),
    mean: Float64Array.from(wholes, ({ mean }) => mean),
  }
}

function insideLaboratories(one: {
  stratum: Stratum
  above: Stratum
  laboratoryOf: Int32Array
  wholes: readonly CellSummary[]
}): CellSummary[] {
  const { stratum, above, laboratoryOf, wholes } = one
  const squares = new Float64Array(wholes.length)
  const groups = new Float64Array(wholes.length)
  const largest = new Float64Array(wholes.length)
  for (let group = 0; group < stratum.mean.length; group += 1) {
    const mean = stratum.mean[group]!
    const member = stratum.firstMember[group]!
    const laboratory = laboratoryOf[member]!
    const distance = mean - above.mean[above.groupOf[member]!]!
    squares[laboratory]! += stratum.size[group]! * distance ** 2
    groups[laboratory]! += 1
    largest[laboratory] = Math.max(largest[laboratory]!, Math.abs(mean))
  }
  for (const member of above.firstMember) groups[laboratoryOf[member]!]! -= 1

  return wholes.map((whole, index) => {
    const df = groups[index]!
    // A laboratory whose results are all equal has no scatter, whatever the last bit of a mean says.
    const rounding = whole.n * (4 * Number.EPSILON * largest[index]!) ** 2
    const ss = squares[index]! <= rounding ? 0 : squares[index]!
    return { ...whole, sd: df >= 1 ? Math.sqrt(ss / df) : undefined, df }
  })
}
