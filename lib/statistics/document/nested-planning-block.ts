import type { LeastPlan, Planning } from '@/lib/statistics/analysis-document'
import type { AskedPlan } from '@/lib/statistics/analysis-input'
import { notComputable, withReasons } from '@/lib/statistics/document/attempt'
import { leastLaboratories } from '@/lib/statistics/least-laboratories'
import {
  laboratoryShare,
  nestedBiasPrecision,
  type NestedDesign,
  type NestedPrecision,
  nestedRepeatabilityPrecision,
  nestedStudies,
} from '@/lib/statistics/nested-planning'

/** Enough for a half-width good to 1 % of itself; the seed is fixed, so that a plan always reads the same. */
const DRAWS = 10_000
const SEED = 57_251_994

/** More laboratories than any study has; so far the least number is looked for. */
const MOST_LABORATORIES = 1000

/**
 * How well nested studies of different sizes would know their figures: the same block as of a one-way plan, with the
 * intermediate precisions, what was assumed, and the least numbers of laboratories. Half-widths are fractions of the
 * value, the bias is in units of σ_R.
 *
 * `null` where it does not exist: repeatability with one replicate (`no-replication`); the least numbers where no
 * half-width is wished for (`not-asked-for`) or no number up to 1000 is enough (`not-reached`).
 *
 * @throws {RangeError} for a plan that `nestedStudies` refuses.
 *
 * Source: `nested-planning.ts`.
 */
export function nestedPlanningBlock(plan: AskedPlan & Pick<NestedDesign, 'inner'>): Planning {
  const { from, to, n, gamma, inner, wished } = plan
  const design = { inner, n, gamma }
  const studies = nestedStudies(design, { seed: SEED, draws: DRAWS })
  const sets = inner.map((_, level) => inner.slice(level).map(({ source }) => source)).toReversed()
  const sizes = Array.from({ length: to - from + 1 }, (_, index) => from + index)

  return withReasons((attempt) => ({
    n,
    gamma,
    points: sizes.map((p) =>
      withReasons((attemptAt) => {
        const { intermediate, reproducibility } = studies(p)
        return {
          p,
          repeatability: attemptAt('repeatability', () => nestedRepeatabilityPrecision(design, p)),
          reproducibility,
          bias: nestedBiasPrecision(design, p),
          intermediate: sets.map((varies, set) => ({ varies, halfWidth: intermediate[set]! })),
        }
      }),
    ),
    nested: {
      inner: inner.map(({ source, groups, share }) => ({ source, groups, share })),
      laboratoryShare: laboratoryShare(design),
      draws: DRAWS,
      seed: SEED,
    },
    least: attempt('least', () =>
      wished === undefined
        ? notComputable('not-asked-for', 'not asked for')
        : leastPlan({ design, studies, sets, wished }),
    ),
  }))
}

function leastPlan(search: {
  design: NestedDesign
  studies: (laboratories: number) => NestedPrecision
  sets: string[][]
  wished: number
}): LeastPlan {
  const { design, studies, sets, wished } = search
  const least = (precision: (laboratories: number) => number) => () =>
    leastLaboratories({ precision, wished, limit: MOST_LABORATORIES })

  return withReasons((attempt) => ({
    wished,
    limit: MOST_LABORATORIES,
    repeatability: attempt(
      'repeatability',
      least((p) => nestedRepeatabilityPrecision(design, p)),
    ),
    intermediate: sets.map((varies, set) =>
      withReasons((attemptSet) => ({
        varies,
        p: attemptSet(
          'p',
          least((p) => studies(p).intermediate[set]!),
        ),
      })),
    ),
    reproducibility: attempt(
      'reproducibility',
      least((p) => studies(p).reproducibility),
    ),
  }))
}
