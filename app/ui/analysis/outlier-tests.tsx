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
  /** Pairs are not consulted where one end alone is beyond 1 %. */
  readonly finding: OutlierLevel | 'not consulted' | null
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
      isMarked={({ finding }) => finding === 'outlier' || finding === 'straggler'}
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
        { key: 'level', header: 'Finding', cell: ({ finding }) => <FindingWord finding={finding} /> },
      ]}
    />
  )
}

function FindingWord({ finding }: { finding: TestRow['finding'] }) {
  if (finding === 'outlier') return <Status tone="danger">outlier</Status>
  if (finding === 'straggler') return <Status tone="warn">straggler</Status>
  return <span className="text-ink-soft">{finding ?? 'not made'}</span>
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
        finding: scatter.level,
        reason: scatter.reasons?.statistic ?? cochran.reasons?.statistic,
      },
      ...grubbsTests.map(({ test, words }) => ({
        material,
        test: words,
        laboratories: grubbs[test].laboratories,
        statistic: grubbs[test].statistic,
        critical: grubbs[test].critical['0.01'],
        pValue: grubbs[test].pValue,
        finding: grubbsFinding(grubbs, test),
        reason: grubbs[test].reasons?.statistic,
      })),
    ]
  })
}

const grubbsTests = [
  { test: 'high', words: 'Grubbs, highest mean' },
  { test: 'low', words: 'Grubbs, lowest mean' },
  { test: 'pairHigh', words: 'Grubbs, two highest' },
  { test: 'pairLow', words: 'Grubbs, two lowest' },
] as const

/** What the order of the tests makes of one: an end may be found only once the other is set aside in thought. */
function grubbsFinding(
  grubbs: AnalysisDocument['materials'][number]['grubbs'],
  test: (typeof grubbsTests)[number]['test'],
): TestRow['finding'] {
  const { level } = grubbs[test]
  const isPair = test === 'pairHigh' || test === 'pairLow'
  if (isPair) return level === null || grubbs.pairsConsulted ? level : 'not consulted'
  return grubbs.proposed.find((each) => each.test === test)?.level ?? level
}
