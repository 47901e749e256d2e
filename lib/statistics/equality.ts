import { studentizedRangeUpperTail } from '@/lib/statistics/distributions/studentized-range'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Are the laboratories alike? The curve of chance that is slid along the axis
 * of laboratory averages, and the range of the averages measured by it.
 *
 * `variance` is that of one result, estimated with `df` degrees of freedom, in
 * the sense that an average of n results has variance / n when the laboratories
 * agree.
 *
 * Source: Box, Hunter & Hunter, Statistics for Experimenters (reference
 * distribution for averages).
 */
export type ReferenceCurve = { df: number; scale: number; n: number; halfWidth95: number }

export function referenceCurve(one: { variance: number; df: number; n: number }): ReferenceCurve {
  const scale = Math.sqrt(one.variance / one.n)
  return { df: one.df, scale, n: one.n, halfWidth95: tQuantileUpper(0.025, one.df) * scale }
}

/** @throws {NotComputable} `too-few-laboratories` below 2; `no-scatter` when the scale is 0. */
export function averageRange(
  averages: readonly number[],
  curve: ReferenceCurve,
): { range: number; pValue: number } {
  if (averages.length < 2) throw new NotComputable('too-few-laboratories', 'Two laboratories are needed.')
  if (curve.scale === 0)
    throw new NotComputable('no-scatter', 'The results inside the laboratories do not differ.')
  const range = (Math.max(...averages) - Math.min(...averages)) / curve.scale
  return { range, pValue: studentizedRangeUpperTail(range, averages.length, curve.df) }
}
