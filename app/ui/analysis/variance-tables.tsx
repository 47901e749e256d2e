import type { AnalysisDocument, MaterialAnalysis } from '@/lib/statistics/analysis-document'
import { DataTable } from '../primitives/data-table'
import { showFigures, showPValue, showStatistic } from './show-quantity'

/** The analysis of variance of every material, folded, with its components by both routes. */
export function VarianceTables({ document, unit }: { document: AnalysisDocument; unit: string }) {
  return (
    <div className="flex flex-col gap-2">
      {document.materials.map((material) => (
        <details key={material.material} data-printed className="border bg-sheet px-4 py-2">
          <summary className="min-h-6 font-semibold">{material.material}</summary>
          <div className="flex flex-col gap-4 py-3">
            <AnovaRows material={material} unit={unit} />
            <Components material={material} unit={unit} />
          </div>
        </details>
      ))}
    </div>
  )
}

function AnovaRows({ material, unit }: { material: MaterialAnalysis; unit: string }) {
  return (
    <DataTable
      caption={`Analysis of variance, ${material.material}`}
      rows={material.anova.rows}
      rowKey={({ source }) => source}
      empty={
        <p>{material.anova.reasons?.rows ?? 'There are too few results for an analysis of variance.'}</p>
      }
      columns={[
        { key: 'source', header: 'Source', isRowHeader: true, cell: ({ source }) => source },
        { key: 'df', header: 'Degrees of freedom', kind: 'figure', cell: ({ df }) => String(df) },
        {
          key: 'ss',
          header: `Sum of squares, (${unit})²`,
          kind: 'figure',
          cell: ({ ss }) => showFigures(ss, 6),
        },
        { key: 'ms', header: 'Mean square', kind: 'figure', cell: ({ ms }) => showFigures(ms, 6) },
        {
          key: 'f',
          header: 'F',
          kind: 'figure',
          cell: ({ f, denominator }) =>
            denominator?.kind === 'Satterthwaite' ? `${showStatistic(f)} (approx.)` : showStatistic(f),
        },
        { key: 'p', header: 'p', kind: 'figure', cell: ({ pValue }) => showPValue(pValue) },
      ]}
    />
  )
}

function Components({ material, unit }: { material: MaterialAnalysis; unit: string }) {
  const byLikelihood = new Map(material.reml.components.map(({ source, variance }) => [source, variance]))
  return (
    <DataTable
      caption={`Components of variance, ${material.material}, in (${unit})²`}
      rows={material.anova.components}
      rowKey={({ source }) => source}
      columns={[
        { key: 'source', header: 'Component', isRowHeader: true, cell: ({ source }) => source },
        {
          key: 'raw',
          header: 'From mean squares',
          kind: 'figure',
          cell: ({ varianceRaw }) => showFigures(varianceRaw, 6),
        },
        {
          key: 'variance',
          header: 'Reported',
          kind: 'figure',
          cell: ({ variance }) => showFigures(variance, 6),
        },
        {
          key: 'sd',
          header: `Standard deviation, ${unit}`,
          kind: 'figure',
          cell: ({ sd }) => showFigures(sd, 6),
        },
        {
          key: 'reml',
          header: 'Restricted likelihood',
          kind: 'figure',
          cell: ({ source }) => likelihoodWords(material, source, byLikelihood),
        },
      ]}
    />
  )
}

function likelihoodWords(
  { reml }: MaterialAnalysis,
  source: string,
  components: ReadonlyMap<string, number | null>,
): string {
  if (reml.converged === false) return 'not found'
  if (reml.boundary.includes(source)) return '0, at the boundary'
  return showFigures(components.get(source) ?? null, 6)
}
