import type { Proposal } from '@/lib/statistics/analysis-document'
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
      return `Were two materials exchanged? Take ${detail}.`
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

function consequence({ kind, after }: Proposal): string {
  const figures = [
    ...(after.h === null ? [] : [`h\u00a0=\u00a0${showStatistic(after.h)}`]),
    ...(after.k === null ? [] : [`k\u00a0=\u00a0${showStatistic(after.k)}`]),
  ]
  return `${kind === 'oneApart' ? 'Without it' : 'Corrected so'}, the cell would fit the others${figures.length > 0 ? `: ${figures.join(', ')}` : ''}.`
}

const shown = (text: string) => text.replaceAll('-', '\u2212')
