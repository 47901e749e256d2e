import type { AnalysisDocument } from '@/lib/statistics/analysis-document'
import { ChartFrame } from '../charts/chart-frame'
import { ConsistencyPlot } from '../charts/consistency-plot'
import { DataTable } from '../primitives/data-table'
import { Tag } from '../primitives/tag'
import { consistencyData } from './consistency-data'
import { noFigure, showStatistic } from './show-quantity'

const words = {
  h: { title: 'Between laboratories, h', one: 'its mean', many: 'their means' },
  k: { title: 'Within laboratories, k', one: 'its scatter', many: 'their scatter' },
} as const

/** The two consistency plots of one measurand, each with its table. */
export function ConsistencyPlots({ document }: { document: AnalysisDocument }) {
  return (
    <>
      <ConsistencyFrame document={document} statistic="h" />
      <ConsistencyFrame document={document} statistic="k" />
    </>
  )
}

function ConsistencyFrame({ document, statistic }: { document: AnalysisDocument; statistic: 'h' | 'k' }) {
  const data = consistencyData(document, statistic)
  const svgId = `${statistic}-plot`
  return (
    <ChartFrame
      title={words[statistic].title}
      summary={summaryOf(data, statistic)}
      svgId={svgId}
      table={<ConsistencyTable data={data} />}
    >
      <ConsistencyPlot svgId={svgId} {...data} />
    </ChartFrame>
  )
}

type Data = ReturnType<typeof consistencyData>

function summaryOf({ laboratories, criticals }: Data, statistic: 'h' | 'k'): string {
  const cells = laboratories.flatMap(({ code, cells }) =>
    cells.flatMap((cell) => (cell?.beyond && cell.beyond !== '5 %' ? [`${code} ${cell.material}`] : [])),
  )
  if (criticals.length === 0)
    return `${statistic} has no critical value here: there are too few laboratories or replicates.`
  if (cells.length === 0) return 'No cell lies beyond the 1 % critical value.'
  const names =
    cells.length > 8 ? `${cells.slice(0, 8).join(', ')} and ${cells.length - 8} more` : cells.join(', ')
  return cells.length === 1
    ? `One cell lies beyond the 1 % critical value by ${words[statistic].one}: ${names}.`
    : `${cells.length} cells lie beyond the 1 % critical value by ${words[statistic].many}: ${names}.`
}

function ConsistencyTable({ data }: { data: Data }) {
  return (
    <DataTable
      caption={`${words[data.statistic].title}, by laboratory and material`}
      rows={data.laboratories}
      rowKey={({ code }) => code}
      columns={[
        { key: 'code', header: 'Laboratory', isRowHeader: true, cell: ({ code }) => <Tag code={code} /> },
        ...data.materials.map((material, index) => ({
          key: material,
          header: material,
          kind: 'figure' as const,
          cell: ({ cells }: Data['laboratories'][number]) => {
            const cell = cells[index]
            if (!cell) return noFigure
            return cell.beyond ? (
              <strong>
                {showStatistic(cell.value)}{' '}
                <span className="font-sans text-small font-normal">beyond {cell.beyond}</span>
              </strong>
            ) : (
              showStatistic(cell.value)
            )
          },
        })),
      ]}
    />
  )
}
