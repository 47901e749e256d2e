import type { AnalysisDocument, RelationForms } from '@/lib/statistics/analysis-document'
import { DataTable } from '../primitives/data-table'
import { showFigures } from './show-quantity'

/** How the precision depends on the level, in the three forms of the standard. */
export function LevelRelationTable({ document }: { document: AnalysisDocument }) {
  const relation = document.levelRelation
  if (!relation)
    return (
      <p className="text-ink-soft">
        {document.reasons?.levelRelation ?? 'There are too few materials to relate precision to level.'}
      </p>
    )
  const rows = [
    {
      key: 'r',
      name: (
        <>
          s<sub>r</sub>
        </>
      ),
      forms: relation.repeatability,
    },
    {
      key: 'R',
      name: (
        <>
          s<sub>R</sub>
        </>
      ),
      forms: relation.reproducibility,
    },
  ]
  return (
    <DataTable
      caption="Precision against level"
      isCaptionHidden
      rows={rows}
      rowKey={({ key }) => key}
      columns={[
        { key: 'name', header: 'Of', isRowHeader: true, cell: ({ name }) => name },
        {
          key: 'proportional',
          header: 's = b m',
          kind: 'figure',
          cell: ({ forms }) => `b = ${showFigures(forms.proportional.b, 3)}`,
        },
        {
          key: 'linear',
          header: 's = a + b m',
          kind: 'figure',
          cell: ({ forms }) => `a = ${showFigures(forms.linear.a, 3)}, b = ${showFigures(forms.linear.b, 3)}`,
        },
        {
          key: 'power',
          header: (
            <>
              log<sub>10</sub> s = c + d log<sub>10</sub> m
            </>
          ),
          kind: 'figure',
          cell: ({ forms }) => `c = ${showFigures(forms.power.c, 3)}, d = ${showFigures(forms.power.d, 3)}`,
        },
        { key: 'proposed', header: 'Fits best', cell: ({ forms }) => proposedWords(forms) },
      ]}
    />
  )
}

function proposedWords({ proposed, reasons }: RelationForms): string {
  if (proposed === null) return reasons?.proposed ?? 'cannot be told'
  return { proportional: 'proportional', linear: 'straight line', power: 'power of the level' }[proposed]
}
