import { plural } from '@/lib/domain/plural'
import type { AnalysisDocument, MaterialAnalysis } from '@/lib/statistics/analysis-document'
import { CellMeansPlot } from '../charts/cell-means-plot'
import { ChartFrame } from '../charts/chart-frame'
import { PrecisionBars } from '../charts/precision-bars'
import { DataTable } from '../primitives/data-table'
import { Tag } from '../primitives/tag'
import { sayPValue, showFigures } from './show-quantity'

/** How the variance of each material splits up. */
export function VarianceShares({ document }: { document: AnalysisDocument }) {
  const inner = document.input.nesting.slice(1, -1)
  const shares = document.materials.flatMap((material) => sharesOf(material, inner.length > 0))
  if (shares.length === 0) return null
  return (
    <ChartFrame
      title="Where the variance comes from"
      summary="The reproducibility variance of each material, split into its parts; a negative estimate counts as 0."
      svgId="variance-shares"
      table={
        <DataTable
          caption="Components of variance by material"
          rows={shares}
          rowKey={({ name }) => name}
          columns={[
            { key: 'name', header: 'Material', isRowHeader: true, cell: ({ name }) => name },
            {
              key: 'within',
              header: 'Repeatability',
              kind: 'figure',
              cell: ({ within }) => showFigures(within),
            },
            ...(inner.length > 0
              ? [
                  {
                    key: 'groups',
                    header: `Between ${inner.join(', ')}`,
                    kind: 'figure' as const,
                    cell: (row: (typeof shares)[number]) => showFigures(row.betweenGroups),
                  },
                ]
              : []),
            {
              key: 'laboratories',
              header: 'Between laboratories',
              kind: 'figure',
              cell: ({ betweenLaboratories }) => showFigures(betweenLaboratories),
            },
          ]}
        />
      }
    >
      <PrecisionBars
        svgId="variance-shares"
        materials={shares}
        {...(inner.length > 0 ? { groupName: inner.map(plural).join(' and ') } : {})}
      />
    </ChartFrame>
  )
}

function sharesOf(
  { material, repeatability, betweenLaboratory, anova }: MaterialAnalysis,
  isNested: boolean,
) {
  if (repeatability.variance === null || betweenLaboratory.variance === null) return []
  const groups = anova.components.filter(({ source }) => source !== 'laboratory' && source !== 'residual')
  return [
    {
      name: material,
      within: repeatability.variance,
      betweenGroups: isNested ? groups.reduce((sum, { variance }) => sum + (variance ?? 0), 0) : null,
      betweenLaboratories: betweenLaboratory.variance,
    },
  ]
}

/** The cell means of one material under the curve that equal laboratories would follow. */
export function CellMeans({
  material,
  unit,
  decimals,
}: {
  material: MaterialAnalysis
  unit: string
  decimals: number
}) {
  const { reference } = material.equality
  const { scale, df } = reference
  if (material.meanOfCellMeans === null) return null
  if (!scale || df === null)
    return (
      <p className="max-w-text text-ink-soft">
        {material.material}:{' '}
        {reference.reasons?.scale ??
          material.equality.reasons?.f ??
          'there is no scatter within the laboratories to compare their means by.'}
      </p>
    )
  const cells = material.cells.flatMap(({ laboratory, mean, sd: cellSd, n }) =>
    mean === null ? [] : [{ code: laboratory, mean, sd: cellSd, count: n }],
  )
  const svgId = `means-${material.material.replace(/\W+/g, '-')}`
  return (
    <ChartFrame
      level={3}
      title={`Are the laboratories alike on ${material.material}?`}
      summary={equalitySummary(material)}
      svgId={svgId}
      table={
        <DataTable
          caption={`Cell means and standard deviations, ${material.material}, in ${unit}`}
          rows={cells}
          rowKey={({ code }) => code}
          columns={[
            { key: 'code', header: 'Laboratory', isRowHeader: true, cell: ({ code }) => <Tag code={code} /> },
            { key: 'n', header: 'Results', kind: 'figure', cell: ({ count }) => String(count) },
            { key: 'mean', header: 'Mean', kind: 'figure', cell: ({ mean }) => mean.toFixed(decimals + 1) },
            { key: 's', header: 's', kind: 'figure', cell: ({ sd: cellSd }) => showFigures(cellSd, 3) },
          ]}
        />
      }
    >
      <CellMeansPlot
        svgId={svgId}
        material={material.material}
        unit={unit}
        cells={cells}
        grandMean={material.meanOfCellMeans}
        reference={{ scale, degreesOfFreedom: df }}
        {...(reference.halfWidth95 === null ? {} : { halfWidth: reference.halfWidth95 })}
        decimals={decimals + 1}
      />
    </ChartFrame>
  )
}

function equalitySummary({ equality }: MaterialAnalysis): string {
  if (equality.pValue === null)
    return (
      equality.reasons?.f ?? equality.reasons?.pValue ?? 'The means of the laboratories cannot be compared.'
    )
  const verdict =
    equality.pValue < 0.05 ? 'Averages this far apart would be rare' : 'Averages this far apart are usual'
  return `${verdict} if all laboratories agreed: F gives ${sayPValue(equality.pValue)}, the range of the means ${sayPValue(equality.rangePValue)}. The curve is a picture; these two figures decide.`
}
