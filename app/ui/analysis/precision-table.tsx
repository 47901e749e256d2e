import type { AnalysisDocument, Interval, MaterialAnalysis } from '@/lib/statistics/analysis-document'
import { DataTable, type Column } from '../primitives/data-table'
import { Figure } from '../primitives/figure'
import { formatFigure } from '../primitives/format-figure'
import { noFigure, showFigures, showInterval } from './show-quantity'

/** The precision figures of every material, rounded as a report rounds them. */
export function PrecisionTable({
  document,
  unit,
  hasTrueZero,
}: {
  document: AnalysisDocument
  unit: string
  hasTrueZero: boolean
}) {
  const isNested = document.materials.some(({ intermediate }) => intermediate.length > 0)
  return (
    <DataTable
      caption={`Precision by material, in ${unit}`}
      isCaptionHidden
      rows={document.materials}
      rowKey={({ material }) => material}
      columns={[
        { key: 'material', header: 'Material', isRowHeader: true, cell: ({ material }) => material },
        count('laboratories', 'Laboratories'),
        count('results', 'Results'),
        rounded('mean', 'Mean'),
        rounded(
          'repeatability',
          <>
            s<sub>r</sub>
          </>,
        ),
        ...(isNested
          ? [
              {
                key: 'intermediate',
                header: (
                  <>
                    s<sub>I</sub>
                  </>
                ),
                kind: 'figure' as const,
                cell: intermediate,
              },
            ]
          : []),
        rounded(
          'reproducibility',
          <>
            s<sub>R</sub>
          </>,
        ),
        rounded('repeatabilityLimit', 'Limit r'),
        rounded('reproducibilityLimit', 'Limit R'),
        ...(hasTrueZero
          ? [
              {
                key: 'relative-r',
                header: (
                  <>
                    s<sub>r</sub>, %
                  </>
                ),
                kind: 'figure' as const,
                cell: (row: MaterialAnalysis) => showFigures(row.repeatability.relative, 2),
              },
              {
                key: 'relative-R',
                header: (
                  <>
                    s<sub>R</sub>, %
                  </>
                ),
                kind: 'figure' as const,
                cell: (row: MaterialAnalysis) => showFigures(row.reproducibility.relative, 2),
              },
            ]
          : []),
      ]}
    />
  )
}

function count(key: 'laboratories' | 'results', header: string): Column<MaterialAnalysis> {
  return { key, header, kind: 'figure', cell: (row) => String(row[key]) }
}

function rounded(
  key: keyof Omit<MaterialAnalysis['rounded'], 'reasons' | 'intermediate'>,
  header: Column<MaterialAnalysis>['header'],
): Column<MaterialAnalysis> {
  return {
    key,
    header,
    kind: 'figure',
    cell: ({ rounded: block }) =>
      block[key] === null ? (
        <span title={block.reasons?.[key]}>{noFigure}</span>
      ) : (
        <Figure value={block[key]} />
      ),
  }
}

function intermediate({ intermediate: sets, rounded: block }: MaterialAnalysis) {
  return sets.map(({ varies }, index) => (
    <span key={varies.join()} className="block">
      {formatFigure(block.intermediate[index] ?? noFigure)}{' '}
      <span className="font-sans text-ink-soft">({varies.join(', ')})</span>
    </span>
  ))
}

/** An interval, with the reason where it is missing or nought, and a mark where it was widened. */
function IntervalCell({ interval }: { interval: Interval }) {
  const reason = interval.reasons?.upper ?? interval.reasons?.lower
  return (
    <>
      {showInterval(interval)}
      {interval.extended && <span className="block font-sans text-ink-soft">widened to the estimate</span>}
      {reason && (
        <span className="block max-w-44 whitespace-normal text-left font-sans text-ink-soft">{reason}</span>
      )}
    </>
  )
}

/** The 95 % intervals of the standard deviations, with what is said of one that was widened or is missing. */
export function IntervalTable({ document, unit }: { document: AnalysisDocument; unit: string }) {
  return (
    <DataTable
      caption={`95 % intervals of the standard deviations, in ${unit}`}
      isCaptionHidden
      rows={document.materials}
      rowKey={({ material }) => material}
      columns={[
        { key: 'material', header: 'Material', isRowHeader: true, cell: ({ material }) => material },
        {
          key: 'r',
          header: (
            <>
              s<sub>r</sub>
            </>
          ),
          kind: 'figure',
          cell: (row) => <IntervalCell interval={row.repeatability.ci95} />,
        },
        {
          key: 'L',
          header: (
            <>
              s<sub>L</sub>
            </>
          ),
          kind: 'figure',
          cell: (row) => <IntervalCell interval={row.betweenLaboratory.ci95} />,
        },
        {
          key: 'R',
          header: (
            <>
              s<sub>R</sub>
            </>
          ),
          kind: 'figure',
          cell: (row) => <IntervalCell interval={row.reproducibility.ci95} />,
        },
        {
          key: 'raw',
          header: (
            <>
              s<sub>L</sub>
              <sup>2</sup> before cutting at 0
            </>
          ),
          kind: 'figure',
          cell: (row) => showFigures(row.betweenLaboratory.varianceRaw),
        },
      ]}
    />
  )
}
