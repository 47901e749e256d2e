import type { HomogeneityCheck } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { generalisedCochranBlock } from '@/lib/statistics/document/consistency-blocks'
import { required, withReasons } from '@/lib/statistics/document/attempt'
import { homogeneityFigures, homogeneityPValue, homogeneityVerdict } from '@/lib/statistics/homogeneity'

/**
 * The check of homogeneity of one material, standard deviations in the unit of the results.
 *
 * `units[i][j]` is portion j of unit i as a deviation; `target` is σ, without which there is no verdict. Fewer than 10
 * units are judged all the same and said to be few. Source: ISO 13528, Annex B; `homogeneity.ts`.
 */
export function homogeneityBlock(one: {
  material: string
  units: readonly (readonly number[])[]
  summaries: readonly CellSummary[]
  target: number | null
}): HomogeneityCheck {
  const check = withReasons((attempt): Omit<HomogeneityCheck, 'reasons'> => {
    const figures = attempt('sx', () => homogeneityFigures(one.units))
    const target = attempt('target', () => required(one.target, 'No target standard deviation was given.'))
    const verdict = figures === null || target === null ? null : homogeneityVerdict(figures, target)
    return {
      material: one.material,
      units: one.units.length,
      portions: figures?.portions ?? null,
      sx: figures?.sx ?? null,
      sw: figures?.sw ?? null,
      ssSquaredRaw: figures?.ssSquaredRaw ?? null,
      ss: figures?.ss ?? null,
      f1: figures?.f1 ?? null,
      f2: figures?.f2 ?? null,
      target,
      basic: verdict?.basic ?? null,
      expanded: verdict?.expanded ?? null,
      checkPrecise: verdict?.checkPrecise ?? null,
      fPValue:
        figures === null ? null : attempt('fPValue', () => homogeneityPValue(figures, one.units.length)),
      cochran: generalisedCochranBlock(one.summaries),
    }
  })
  if (one.units.length >= ENOUGH_UNITS) return check
  return { ...check, reasons: { ...check.reasons, units: FEW_UNITS } }
}

const ENOUGH_UNITS = 10
const FEW_UNITS = 'Fewer than 10 units suffice only with earlier evidence.'
