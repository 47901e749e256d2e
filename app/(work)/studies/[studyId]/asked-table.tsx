import { DataTable } from '@/app/ui/primitives/data-table'
import { counted } from '@/lib/domain/plural'
import type { StudyView } from '@/lib/use-cases/studies/read-study'

/** What each measurand asks of a laboratory. */
export function AskedTable({ layout }: Pick<StudyView, 'layout'>) {
  const { measurands, materials, levels } = layout
  const perMaterial = levels.reduce((product, { count }) => product * count, 1)
  const within = levels.map(({ name, count }) => counted(count, name)).join(', each with ')
  return (
    <DataTable
      caption="Measurands"
      isCaptionHidden
      rows={measurands}
      rowKey={({ measurandId }) => measurandId}
      columns={[
        { key: 'name', header: 'Measurand', isRowHeader: true, cell: ({ name }) => name },
        { key: 'unit', header: 'Unit', cell: ({ unit }) => <span className="font-mono">{unit}</span> },
        { key: 'decimals', header: 'Decimals', kind: 'figure', cell: ({ decimals }) => decimals },
        { key: 'zero', header: 'True zero', cell: ({ hasTrueZero }) => (hasTrueZero ? 'yes' : 'no') },
        { key: 'within', header: 'On each material', cell: () => within },
        { key: 'results', header: 'Results', kind: 'figure', cell: () => perMaterial * materials.length },
      ]}
    />
  )
}
