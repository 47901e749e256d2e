import type { MaterialAnalysis } from '@/lib/statistics/analysis-document'

/**
 * The laboratories whose cell stands apart enough to look for an explanation, in the order of the cells: beyond
 * 0.5 % in h or k, at least a straggler in Cochran's test, or proposed by Grubbs' tests taken in their order.
 *
 * Source: our own; flagging decides nothing but where to look.
 */
export function flaggedCells({
  cells,
  critical,
  cochran,
  grubbs,
}: Pick<MaterialAnalysis, 'cells' | 'critical' | 'cochran' | 'grubbs'>): string[] {
  const flagged = new Set(grubbs.proposed.flatMap(({ laboratories }) => laboratories))
  for (const { laboratory, h, k, kCritical } of cells) {
    const bounds = [critical.h['0.005'], kCritical['0.005']] as const
    if (h !== null && bounds[0] !== null && Math.abs(h) > bounds[0]) flagged.add(laboratory)
    if (k !== null && bounds[1] !== null && k > bounds[1]) flagged.add(laboratory)
  }
  if (cochran.level !== null && cochran.level !== 'none') flagged.add(cochran.generalised.laboratory!)
  return cells.map(({ laboratory }) => laboratory).filter((laboratory) => flagged.has(laboratory))
}
