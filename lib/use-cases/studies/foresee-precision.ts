import type { PlanAssumptions } from '@/lib/domain/read-plan-assumptions'
import { type AskedPlan, planningBlock } from '@/lib/statistics'

type Levels = readonly { readonly name: string; readonly count: number }[]

export interface ForeseenFigure {
  /** What varies between two results beyond the replicate: nothing, inner levels from the outermost, or the laboratory too. */
  readonly kind: 'repeatability' | 'intermediate' | 'reproducibility'
  readonly varies: readonly string[]
  /** The fewest laboratories that bring it within what is wished; null where a thousand do not. */
  readonly least: number | null
}

export interface ForeseenPrecision {
  /** From the inside outwards; repeatability is missing where each innermost group holds one result. */
  readonly figures: readonly ForeseenFigure[]
  /** Half-widths as fractions of the value, in the order of the figures. */
  readonly points: readonly { laboratories: number; halfWidths: readonly number[] }[]
  /** Simulated studies a point; null where the formulas of the one-way layout serve. */
  readonly draws: number | null
  readonly laboratoryShare: number
  /** The formulas are too small by some per cent where σ_R is hardly above σ_r. */
  readonly isFirstOrderPoor: boolean
}

const fewest = 4
const most = { drawn: 60, searched: 1000 }

/** Levels that can be told apart from the one around them: more than one group, and not the single result. */
export function innerLevelsOf(levels: Levels): Levels {
  return levels.slice(0, -1).filter(({ count }) => count > 1)
}

/**
 * How well a plan will know its standard deviations, for 4 laboratories up to 30, or as many as are expected. Levels as a
 * plan names them, from the outermost, the last one the single results.
 */
export function foreseePrecision(asked: {
  levels: Levels
  expected: number
  assumptions: PlanAssumptions
}): ForeseenPrecision {
  const { levels, expected, assumptions } = asked
  const inner = innerLevelsOf(levels).map(({ name, count }, index) => ({
    source: name,
    groups: count,
    share: assumptions.shares[index] ?? 0,
  }))
  const plan: AskedPlan = {
    from: fewest,
    to: Math.min(Math.max(30, expected), most.drawn),
    n: levels.at(-1)?.count ?? 1,
    gamma: assumptions.ratio,
    inner,
    wished: assumptions.within,
  }
  const isReplicated = plan.n > 1
  const { points, least, nested, reasons } = planningBlock(plan)
  const found = least ?? leastOneWay(plan)
  const sets = least?.intermediate ?? []

  return {
    figures: [
      ...(isReplicated ? [{ kind: 'repeatability' as const, varies: [], least: found.repeatability }] : []),
      ...sets.map(({ varies, p }) => ({ kind: 'intermediate' as const, varies, least: p })),
      { kind: 'reproducibility', varies: [], least: found.reproducibility },
    ],
    points: points.map(({ p, repeatability, intermediate = [], reproducibility }) => ({
      laboratories: p,
      halfWidths: [
        ...(repeatability === null ? [] : [repeatability]),
        ...intermediate.map(({ halfWidth }) => halfWidth),
        ...(reproducibility === null ? [] : [reproducibility]),
      ],
    })),
    draws: nested?.draws ?? null,
    laboratoryShare: nested?.laboratoryShare ?? 1,
    isFirstOrderPoor: reasons?.['reproducibility'] !== undefined,
  }
}

/** The formulas cost nothing, so every number is looked at. */
function leastOneWay({ n, gamma, wished = 1 }: AskedPlan) {
  const { points } = planningBlock({ from: 2, to: most.searched, n, gamma })
  const first = (key: 'repeatability' | 'reproducibility') =>
    points.find((point) => (point[key] ?? Infinity) <= wished)?.p ?? null
  return { repeatability: first('repeatability'), reproducibility: first('reproducibility') }
}
