import type { AnalysisDocument, CellBlock, MaterialAnalysis } from '@/lib/statistics/analysis-document'
import type { ConsistencyData } from '../charts/consistency-layout'
import { showStatistic } from './show-quantity'

type Limit = NonNullable<NonNullable<ConsistencyData['laboratories'][number]['cells'][number]>['beyond']>

const levels: readonly { alpha: '0.005' | '0.01' | '0.05'; label: Limit }[] = [
  { alpha: '0.005', label: '0.5 %' },
  { alpha: '0.01', label: '1 %' },
  { alpha: '0.05', label: '5 %' },
]

/** Every laboratory of an analysis, in code order. */
export function listLaboratories(document: AnalysisDocument): string[] {
  return [
    ...new Set(document.materials.flatMap(({ cells }) => cells.map(({ laboratory }) => laboratory))),
  ].sort()
}

/** The plot of h or k: each cell judged by its own critical value, the lines drawn for the layout of most cells. */
export function consistencyData(document: AnalysisDocument, statistic: 'h' | 'k'): ConsistencyData {
  return {
    statistic,
    order: 'laboratory',
    materials: document.materials.map(({ material }) => material),
    laboratories: listLaboratories(document).map((code) => ({
      code,
      cells: document.materials.map((material) => {
        const cell = material.cells.find(({ laboratory }) => laboratory === code)
        const value = cell?.[statistic] ?? null
        if (!cell || value === null) return null
        return {
          material: material.material,
          value,
          beyond: beyond(material, cell, statistic),
          note: noteOf(cell),
        }
      }),
    })),
    criticals: levels.slice(1).flatMap(({ alpha, label }) => {
      const value = commonCritical(document, statistic, alpha)
      return value === null ? [] : [{ label, value }]
    }),
  }
}

/** The strictest level that a cell's h or k passes, by its own critical values. */
export function beyond(material: MaterialAnalysis, cell: CellBlock, statistic: 'h' | 'k'): Limit | null {
  const value = cell[statistic]
  if (value === null) return null
  const critical = statistic === 'h' ? material.critical.h : cell.kCritical
  return (
    levels.find(({ alpha }) => critical[alpha] !== null && Math.abs(value) > critical[alpha])?.label ?? null
  )
}

function noteOf(cell: CellBlock): string {
  return `${cell.n} ${cell.n === 1 ? 'result' : 'results'}, h ${showStatistic(cell.h)}, k ${showStatistic(cell.k)}`
}

/** Cells differ in size, and materials in their laboratories; a line can stand for one case only: the commonest. */
function commonCritical(
  document: AnalysisDocument,
  statistic: 'h' | 'k',
  alpha: '0.005' | '0.01' | '0.05',
): number | null {
  const values = document.materials.flatMap((material) =>
    statistic === 'h' ? [material.critical.h[alpha]] : material.cells.map((cell) => cell.kCritical[alpha]),
  )
  const counts = new Map<number, number>()
  for (const value of values) if (value !== null) counts.set(value, (counts.get(value) ?? 0) + 1)
  return [...counts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? null
}
