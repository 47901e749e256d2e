import { beyond } from '@/app/ui/analysis/consistency-data'
import { equalProposals, flaggedCells } from '@/lib/statistics'
import type { AnalysisDocument, CellBlock, Proposal } from '@/lib/statistics/analysis-document'

export interface CellApart {
  readonly material: string
  readonly cell: CellBlock
  readonly h: ReturnType<typeof beyond>
  readonly k: ReturnType<typeof beyond>
  readonly explanations: readonly { likelihood: Likelihood; proposal: Proposal }[]
  /** An explanation was looked for and there is none. */
  readonly isUnexplained: boolean
}

/** How an explanation compares with the one before it. */
export type Likelihood = 'likeliest' | 'equal' | 'less'

/** The cells beyond a 1 % value, the furthest first; an explanation that fits several of them is told at the first. */
export function listCellsApart({ materials }: Pick<AnalysisDocument, 'materials'>): CellApart[] {
  const told = new Set<string>()
  return materials
    .flatMap((material) => {
      const flagged = new Set(flaggedCells(material))
      return material.cells.flatMap((cell) => {
        const h = beyond(material, cell, 'h')
        const k = beyond(material, cell, 'k')
        if ((!h || h === '5 %') && (!k || k === '5 %')) return []
        const proposals = material.proposals?.filter(({ laboratory }) => laboratory === cell.laboratory)
        const isUnexplained = proposals?.length === 0 && flagged.has(cell.laboratory)
        return [{ material: material.material, cell, h, k, proposals: proposals ?? [], isUnexplained }]
      })
    })
    .sort((a, b) => surpriseOf(a.cell) - surpriseOf(b.cell))
    .map(({ proposals, ...one }) => {
      const isBestTold = proposals.length > 0 && told.has(keyOf(proposals[0]!))
      const untold = isBestTold ? [] : proposals.filter((proposal) => !told.has(keyOf(proposal)))
      for (const proposal of proposals) told.add(keyOf(proposal))
      return { ...one, explanations: withLikelihood(untold) }
    })
}

function withLikelihood(proposals: readonly Proposal[]): CellApart['explanations'] {
  return equalProposals(proposals).flatMap((group, rank) =>
    group.map((proposal, place) => ({
      likelihood: place > 0 ? ('equal' as const) : rank > 0 ? ('less' as const) : ('likeliest' as const),
      proposal,
    })),
  )
}

function keyOf({ laboratory, kind, detail, cells }: Proposal): string {
  return JSON.stringify([laboratory, kind, detail, cells])
}

/** The smaller of the two p-values: the cell furthest out stands first. */
function surpriseOf({ hPValue, kPValue }: CellBlock): number {
  return Math.min(hPValue ?? 1, kPValue ?? 1)
}
