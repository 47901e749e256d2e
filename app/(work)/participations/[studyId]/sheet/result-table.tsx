import clsx from 'clsx'
import { measurandTitle, type LayoutRow, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { nameLevels, nameRow } from '../../name-place'
import { ResultCell } from './result-cell'

export interface MaterialGroup {
  readonly name: string
  /** Where the group's first row stands among all rows. */
  readonly firstRow: number
  readonly rows: readonly LayoutRow[]
}

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
  const hasRowGroups = layout.levels.some(({ count }) => count > 1)
  return (
    <table role={isLive ? 'grid' : 'table'} className="w-full border-collapse text-small max-sm:block">
      <caption className="sr-only">
        Results of this laboratory, one row for each test result to report
      </caption>
      <thead role="rowgroup" className="max-sm:hidden">
        <tr role="row">
          <th
            role="columnheader"
            scope="col"
            className="h-9 w-px whitespace-nowrap border-b px-3 py-2 text-left align-bottom font-semibold text-ink-soft"
          >
            {hasRowGroups ? 'Test result' : 'Material'}
          </th>
          {measurands.map((measurand) => (
            <th
              key={measurand.id}
              role="columnheader"
              scope="col"
              className="h-9 border-b px-3 py-2 text-left align-bottom font-semibold text-ink-soft"
            >
              {measurandTitle(measurand)}
            </th>
          ))}
        </tr>
      </thead>
      {groups.map((group, index) => (
        <tbody
          key={group.firstRow}
          role="rowgroup"
          className={clsx(
            'border-b last:border-b-0 max-sm:block max-sm:border-0',
            isLive && index !== shown && 'max-sm:hidden',
          )}
        >
          {hasRowGroups && (
            <tr role="row" className="max-sm:hidden">
              <th
                role="rowheader"
                scope="rowgroup"
                colSpan={measurands.length + 1}
                className="px-3 pb-0.5 pt-3 text-left text-base font-semibold"
              >
                {group.name}
              </th>
            </tr>
          )}
          {group.rows.map((row, offset) => (
            <tr
              key={offset}
              role="row"
              className="max-sm:mb-4 max-sm:block max-sm:border max-sm:bg-sheet max-sm:px-3.5 max-sm:py-3"
            >
              <th
                role="rowheader"
                scope="row"
                className="whitespace-nowrap px-3 py-1 text-left font-normal max-sm:block max-sm:p-0 max-sm:pb-1.5 max-sm:text-base max-sm:font-semibold"
              >
                {hasRowGroups ? sentence(nameLevels(layout, row.groups)) : group.name}
              </th>
              {measurands.map((measurand, column) => {
                const position = (group.firstRow + offset) * measurands.length + column
                return (
                  <td
                    key={measurand.id}
                    role={isLive ? 'gridcell' : 'cell'}
                    className="px-3 py-1 align-top max-sm:block max-sm:px-0"
                  >
                    {measurands.length > 1 && (
                      <span aria-hidden="true" className="mb-1 block text-small text-ink-soft sm:hidden">
                        {measurandTitle(measurand)}
                      </span>
                    )}
                    <ResultCell
                      position={position}
                      text={entries[position] ?? ''}
                      label={`${nameRow(layout, row)}, ${measurandTitle(measurand)}`}
                      measurand={measurand}
                      tabIndex={isLive ? (position === active ? 0 : -1) : undefined}
                      isActive={position === active}
                      isLive={isLive}
                      onText={onText}
                    />
                  </td>
                )
              })}
            </tr>
          ))}
        </tbody>
      ))}
    </table>
  )
}

function sentence(words: string): string {
  return words.charAt(0).toLocaleUpperCase('en-GB') + words.slice(1)
}
