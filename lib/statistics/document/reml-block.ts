import type { RemlBlock } from '@/lib/statistics/analysis-document'
import { withReasons } from '@/lib/statistics/document/attempt'
import type { NestedAnova } from '@/lib/statistics/nested-anova'
import type { NestedLayout } from '@/lib/statistics/nested-layout'
import { fitReml } from '@/lib/statistics/reml'

/**
 * REML beside the analysis of variance, which gives the start of the search: components in u², the mean restored to
 * the scale of the results. `null` with the reason of `fitReml`. Source: `reml.ts`.
 */
export function remlBlock(one: {
  layout: NestedLayout
  anova: () => NestedAnova
  restore: (deviation: number) => number
}): RemlBlock {
  return withReasons((attempt) => {
    const fit = attempt('components', () => fitReml(one.layout, startRatios(one.anova())))
    return {
      components: [...(fit?.components ?? [])],
      deviance: fit?.deviance ?? null,
      converged: fit?.converged ?? null,
      mean: fit === null ? null : one.restore(fit.mean),
      meanStandardError: fit?.meanStandardError ?? null,
      boundary: [...(fit?.boundary ?? [])],
    }
  })
}

/** Where the search begins: the components of the analysis of variance, relative to the residual. */
function startRatios({ components }: NestedAnova): number[] {
  const residual = components.at(-1)!.variance
  return components.slice(0, -1).map(({ variance }) => (residual > 0 ? variance / residual : 1))
}
