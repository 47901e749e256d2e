import { formatFigure } from '@/app/ui/primitives/format-figure'
import { plural } from '@/lib/domain/plural'
import type { PlanAssumptions } from '@/lib/domain/read-plan-assumptions'
import type { ForeseenPrecision } from '@/lib/use-cases/studies/foresee-precision'

interface Assumed {
  assumptions: PlanAssumptions
  inner: readonly { name: string; count: number }[]
  foreseen: ForeseenPrecision
}

/** What the curves rest on, without which they say nothing. */
export function sayAssumed({ assumptions, inner, foreseen }: Assumed): string {
  const { ratio, shares } = assumptions
  const parts = [
    ...inner.map(({ name }, level) => {
      const share = percent(shares[level] ?? 0)
      return level === 0 ? `${share} lies between ${plural(name)}` : `${share} between ${plural(name)}`
    }),
    `${percent(foreseen.laboratoryShare)} between laboratories`,
  ]
  const split = inner.length === 0 ? '' : ` Of the variance beyond repeatability, ${inWords(parts)}.`
  const made =
    foreseen.draws === null
      ? 'From the formulas of ISO 5725-1.'
      : `From ${formatFigure(String(foreseen.draws))} simulated studies of each size, good to about one part in a hundred.`
  const poor = foreseen.isFirstOrderPoor
    ? ' With the two so near, the formulas make the half-width of reproducibility too small, by 6 to 14 % of itself where they are equal.'
    : ''
  return (
    `Assumed: the reproducibility standard deviation is ${ratio === 1 ? 'no larger than' : `${ratio} times`} that of repeatability, every laboratory returns all its results, none is set aside, and results scatter ` +
    `normally.${split} ${made}${poor} The true ratio is known only when the study is done.`
  )
}

function inWords(parts: readonly string[]): string {
  return parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`
}

const percent = (share: number) => `${Number((share * 100).toFixed(1))}\u00a0%`
