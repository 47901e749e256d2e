import { measurandTitle, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { MaterialRows, type MaterialGroup } from './material-rows'

interface ResultTableProps {
  layout: ReturnLayout
  groups: readonly MaterialGroup[]
  entries: readonly string[]
  active: number
  isLive: boolean
  /** On a narrow screen, the one material that is shown. */
  shown: number
  onText: (position: number, text: string) => void
}

/**
 * The sheet as a real table. On a narrow screen its cells stack, one material at a time; the roles are written
 * out because a table that is laid out as blocks would lose them.
 */
export function ResultTable({ layout, groups, entries, active, isLive, shown, onText }: ResultTableProps) {
  const { measurands } = layout
  const columnLook = 'h-9 border-b px-3 py-2 text-left align-bottom font-semibold text-ink-soft'
  return (
    <table role={isLive ? 'grid' : 'table'} className="w-full border-collapse text-small max-sm:block">
      <caption className="sr-only">
        Results of this laboratory, one row for each test result to report
      </caption>
      <thead role="rowgroup" className="max-sm:hidden">
        <tr role="row">
          <th role="columnheader" scope="col" className={`${columnLook} w-px whitespace-nowrap`}>
            {layout.levels.some(({ count }) => count > 1) ? 'Test result' : 'Material'}
          </th>
          {measurands.map((measurand) => (
            <th key={measurand.id} role="columnheader" scope="col" className={columnLook}>
              {measurandTitle(measurand)}
            </th>
          ))}
        </tr>
      </thead>
      {groups.map((group, index) => {
        const first = group.firstRow * measurands.length
        const end = first + group.rows.length * measurands.length
        return (
          <MaterialRows
            key={group.firstRow}
            layout={layout}
            group={group}
            texts={entries.slice(first, end)}
            active={active >= first && active < end ? active : -1}
            isLive={isLive}
            isShown={index === shown}
            onText={onText}
          />
        )
      })}
    </table>
  )
}
