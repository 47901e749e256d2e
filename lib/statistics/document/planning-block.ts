import type { Planning } from '@/lib/statistics/analysis-document'
import type { AskedPlan } from '@/lib/statistics/analysis-input'
import { notComputable, withReasons } from '@/lib/statistics/document/attempt'
import { nestedPlanningBlock } from '@/lib/statistics/document/nested-planning-block'
import { biasPrecision, repeatabilityPrecision, reproducibilityPrecision } from '@/lib/statistics/planning'

const GOOD_GAMMA = 1.5
const FIRST_ORDER = 'A first-order figure: right to 6 % from gamma 1.5, at gamma 1 it is 6 to 14 % too small.'

/**
 * How well studies of different sizes would know their figures: half-widths of 95 % intervals, s_r and s_R as a
 * fraction of themselves, the bias in units of σ_R. One point for each number of laboratories, both ends included.
 * With one replicate repeatability is `null` (`no-replication`). A plan with inner levels is simulated.
 *
 * @throws {RangeError} for a plan of fewer than 2 laboratories or a gamma below 1.
 *
 * Source: ISO 5725-1, 6.3; `planning.ts`.
 */
export function planningBlock(plan: AskedPlan): Planning {
  const { n, gamma, inner = [] } = plan
  if (inner.length > 0) return nestedPlanningBlock({ ...plan, inner })
  const sizes = Array.from({ length: plan.to - plan.from + 1 }, (_, index) => plan.from + index)
  return {
    n,
    gamma,
    ...(gamma < GOOD_GAMMA ? { reasons: { reproducibility: FIRST_ORDER } } : {}),
    points: sizes.map((p) =>
      withReasons((attempt) => ({
        p,
        repeatability: attempt('repeatability', () =>
          n < 2
            ? notComputable('no-replication', 'One replicate tells nothing of repeatability.')
            : repeatabilityPrecision({ p, n, gamma }),
        ),
        reproducibility: reproducibilityPrecision({ p, n, gamma }),
        bias: biasPrecision({ p, n, gamma }),
      })),
    ),
  }
}
