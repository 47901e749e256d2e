import type { Proposal, ProposalState } from '@/lib/statistics/analysis-document'
import { formatFigure } from '../primitives/format-figure'
import { showStatistic } from './show-quantity'

/** What might lie behind a cell that stands apart, as a question to the laboratory; nothing is changed by it. */
export function describeProposal(proposal: Proposal, unit: string): string {
  return `${guess(proposal, unit)} ${consequence(proposal)}`
}

function guess({ kind, detail, cells }: Proposal, unit: string): string {
  switch (kind) {
    case 'factor':
      return `Has the decimal point slipped in the whole cell? Take each result times ${detail}.`
    case 'factorOneResult':
      return `Has the decimal point slipped in one result? Take ${shown(detail)}.`
    case 'unit':
      return `Was this cell given in another unit? Read it in ${detail}.`
    case 'unitAllMaterials':
      return `Was everything given in another unit? Read it in ${detail}.`
    case 'exchange':
      // Two materials are two cells of this measurand; two measurands are the one cell and its like in another.
      return `Were two ${cells.length === 1 ? 'measurands' : 'materials'} exchanged? Take ${detail}.`
    case 'digits':
      return `Were two digits exchanged? Take ${shown(detail)}.`
    case 'offset':
      return `On all ${cells.length} materials its means lie about ${formatFigure(detail.replace(/^-/, ''))}\u00a0${unit} ${detail.startsWith('-') ? 'below' : 'above'} those of the others. Is a zero or a correction wrong?`
    case 'proportion':
      return `On all ${cells.length} materials its means are about ${detail} times those of the others. Is a calibration or a dilution wrong?`
    case 'oneApart':
      return `One result lies apart from the rest of its own cell: ${shown(detail)}.`
  }
}

function consequence({ kind, before, after }: Proposal): string {
  const figures = (['h', 'k', 'surprise'] as const).flatMap((figure) => change(figure, before, after))
  return `${kind === 'oneApart' ? 'Without it' : 'Corrected so'}, the cell would fit the others${figures.length > 0 ? `: ${figures.join(', ')}` : ''}.`
}

/** A figure as it would be and, where that shows, as it is; nothing where it would not be. */
function change(figure: 'h' | 'k' | 'surprise', before: ProposalState, after: ProposalState): string[] {
  const [is, wouldBe] = [before[figure], after[figure]]
  if (wouldBe === null) return []
  const show = (value: number) =>
    figure === 'surprise' ? formatFigure(value.toFixed(1)) : showStatistic(value)
  const name = figure === 'surprise' ? `surprise\u00a0` : `${figure}\u00a0=\u00a0`
  const differs = is !== null && show(is) !== show(wouldBe)
  return [`${name}${show(wouldBe)}${differs ? ` instead of ${show(is)}` : ''}`]
}

const shown = (text: string) => text.replaceAll('-', '\u2212')
