import type { AnalysisDocument, OutlierLevel } from '@/lib/statistics/analysis-document'
import { DataTable } from '../primitives/data-table'
import { Status } from '../primitives/status'
import { Tag } from '../primitives/tag'
import { noFigure, showPValue, showStatistic } from './show-quantity'

interface TestRow {
  readonly material: string
  readonly test: string
  readonly laboratories: readonly string[]
  readonly statistic: number | null
  readonly critical: number | null
  readonly pValue: number | null
  readonly level: OutlierLevel | null
  readonly reason: string | undefined
}

/** Cochran's and Grubbs' tests of every material. A test proposes; the page around it says who decides. */
export function OutlierTests({ document }: { document: AnalysisDocument }) {
  const rows = listTests(document)
  return (
    <DataTable
      caption="Outlier tests by material"
      isCaptionHidden
      rows={rows}
      rowKey={({ material, test }) => `${material} ${test}`}
      isMarked={({ level }) => level === 'outlier' || level === 'straggler'}
      columns={[
        { key: 'material', header: 'Material', isRowHeader: true, cell: ({ material }) => material },
        { key: 'test', header: 'Test', cell: ({ test }) => <span className="block min-w-40">{test}</span> },
        {
          key: 'laboratory',
          header: 'Cell',
          cell: ({ laboratories, reason }) =>
            laboratories.length > 0 ? (
              <span className="flex gap-1">
                {laboratories.map((code) => (
                  <Tag key={code} code={code} />
                ))}
              </span>
            ) : (
              <span className="text-ink-soft">{reason ?? noFigure}</span>
            ),
        },
        {
          key: 'statistic',
          header: 'Statistic',
          kind: 'figure',
          cell: ({ statistic }) => showStatistic(statistic),
        },
        {
          key: 'critical',
          header: '1 % point',
          kind: 'figure',
          cell: ({ critical }) => showStatistic(critical),
        },
        { key: 'p', header: 'p', kind: 'figure', cell: ({ pValue }) => showPValue(pValue) },
        { key: 'level', header: 'Finding', cell: ({ level }) => <LevelWord level={level} /> },
      ]}
    />
  )
}

function LevelWord({ level }: { level: OutlierLevel | null }) {
  if (level === 'outlier') return <Status tone="danger">outlier</Status>
  if (level === 'straggler') return <Status tone="warn">straggler</Status>
  return <span className="text-ink-soft">{level === null ? 'not made' : 'none'}</span>
}

function listTests(document: AnalysisDocument): TestRow[] {
  return document.materials.flatMap(({ material, cells, cochran, grubbs }) => {
    const unequal = new Set(cells.filter(({ df }) => df > 0).map(({ df }) => df)).size > 1
    const scatter = unequal ? cochran.generalised : cochran
    return [
      {
        material,
        test: unequal ? 'Cochran, generalised to unequal cells' : 'Cochran',
        laboratories: scatter.laboratory === null ? [] : [scatter.laboratory],
        statistic: scatter.statistic,
        critical: scatter.critical['0.01'],
        pValue: scatter.pValue,
        level: scatter.level,
        reason: scatter.reasons?.statistic ?? cochran.reasons?.statistic,
      },
      ...(
        [
          ['Grubbs, highest mean', grubbs.high],
          ['Grubbs, lowest mean', grubbs.low],
          ['Grubbs, two highest', grubbs.pairHigh],
          ['Grubbs, two lowest', grubbs.pairLow],
        ] as const
      ).map(([test, block]) => ({
        material,
        test,
        laboratories: block.laboratories,
        statistic: block.statistic,
        critical: block.critical['0.01'],
        pValue: block.pValue,
        level: block.level,
        reason: block.reasons?.statistic,
      })),
    ]
  })
}
