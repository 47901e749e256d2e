import type { LevelRelation, MaterialAnalysis, RelationForms } from '@/lib/statistics/analysis-document'
import { required, withReasons } from '@/lib/statistics/document/attempt'
import {
  type LevelPoint,
  convergedLinearRelation,
  linearRelation,
  materialsLeftOut,
  powerRelation,
  proportionalRelation,
  proposedForm,
  relationQuality,
} from '@/lib/statistics/level-relation'

/**
 * The three forms for s_r and for s_R over the materials of one measurand, with the one that is proposed. Materials
 * without the mean or the standard deviation take no part; forms are compared on those that every one can use.
 *
 * Source: ISO 5725-2, 7.5; `level-relation.ts`.
 */
export function levelRelationBlock(materials: readonly MaterialAnalysis[]): LevelRelation {
  return {
    repeatability: forms(levelPoints(materials, ({ repeatability }) => repeatability.sd)),
    reproducibility: forms(levelPoints(materials, ({ reproducibility }) => reproducibility.sd)),
  }
}

function levelPoints(
  materials: readonly MaterialAnalysis[],
  sdOf: (material: MaterialAnalysis) => number | null,
): LevelPoint[] {
  return materials.flatMap((one) => {
    const sd = sdOf(one)
    return one.mean === null || sd === null ? [] : [{ material: one.material, mean: one.mean, sd }]
  })
}

const NOT_FITTED = 'The form could not be fitted.'

function forms(points: readonly LevelPoint[]): RelationForms {
  // Fits are compared on the same materials: those that every form can use.
  const common = points.filter(({ mean, sd }) => mean > 0 && sd > 0)
  const proportional = withReasons((attempt) => {
    const fit = attempt('b', () => proportionalRelation(points))
    const q = attempt('q', () => {
      const { b } = required(fit, NOT_FITTED)
      return relationQuality(common, (mean) => b * mean, 1)
    })
    return { b: fit?.b ?? null, q }
  })
  const linear = withReasons((attempt) => {
    const third = attempt('b', () => linearRelation(points))
    const q = attempt('q', () => {
      const { a, b } = required(third, NOT_FITTED)
      return relationQuality(common, (mean) => a + b * mean, 2)
    })
    return { a: third?.a ?? null, b: third?.b ?? null, q }
  })
  const linearConverged = withReasons((attempt) => {
    const fit = attempt('b', () => convergedLinearRelation(points))
    return { a: fit?.a ?? null, b: fit?.b ?? null }
  })
  const power = withReasons((attempt) => {
    const fit = attempt('d', () => powerRelation(points))
    const q = attempt('q', () => {
      const { c, d } = required(fit, NOT_FITTED)
      return relationQuality(common, (mean) => 10 ** (c + d * Math.log10(mean)), 2)
    })
    return { c: fit?.c ?? null, d: fit?.d ?? null, q }
  })
  return withReasons((attempt) => ({
    proportional,
    linear,
    linearConverged,
    power,
    proposed: attempt('proposed', () =>
      required(
        proposedForm({ proportional: proportional.q, linear: linear.q, power: power.q }),
        'No form could be compared.',
      ),
    ),
    leftOut: materialsLeftOut(points),
  }))
}
