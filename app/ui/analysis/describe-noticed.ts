import type { Noticed } from '@/lib/statistics/analysis-document'
import { sayPValue, showFigures } from './show-quantity'

/** What stands out in a laboratory's results though it explains no discrepancy. */
export function describeNoticed({ kind, probability, step, share }: Noticed, unit: string): string {
  if (kind === 'identical')
    return `All results of this cell agree in every digit, which would be rare by chance (${sayPValue(probability)}).`
  if (kind === 'trend') return `The results drift in the order of the runs (${sayPValue(probability)}).`
  const part =
    share === null
      ? ''
      : ` The rounding alone makes ${showFigures(share * 100, 2)}\u00a0% of the repeatability variance.`
  return `The results go in steps of ${showFigures(step, 2)}\u00a0${unit}, coarser than asked.${part}`
}
