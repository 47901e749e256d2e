import clsx from 'clsx'
import type { ReactNode } from 'react'
import { SortableHeader, type Sort } from './sortable-header'

export interface Column<Row> {
  key: string
  header: ReactNode
  /** Figures are set in mono and to the right; actions shrink to their width. */
  kind?: 'text' | 'figure' | 'action'
  /** The cell that names its row; one a table. */
  isRowHeader?: boolean
  sort?: Sort
  cell: (row: Row) => ReactNode
}

interface DataTableProps<Row> {
  caption: string
  /** When a heading just above says the same. */
  isCaptionHidden?: boolean
  columns: readonly Column<Row>[]
  rows: readonly Row[]
  rowKey: (row: Row) => string
  /** Marks a row as chosen or as spoken of elsewhere on the page. */
  isMarked?: (row: Row) => boolean
  /** Stands in place of the table when there are no rows. */
  empty?: ReactNode
}

/** A real table in a region that scrolls sideways, by keyboard too, when it is wider than the page. */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const { caption, isCaptionHidden = false, columns, rows, rowKey, isMarked, empty } = props
  if (rows.length === 0 && empty) return <>{empty}</>

  return (
    <div
      role="region"
      aria-label={caption}
      tabIndex={0}
      data-scrolls
      className="relative overflow-x-auto border bg-sheet"
    >
      <table className="w-full border-collapse text-small">
        <caption className={isCaptionHidden ? 'sr-only' : 'px-3 pb-1 pt-2.5 text-left font-semibold'}>
          {caption}
        </caption>
        <thead>
          <tr>
            {columns.map((column) => (
              <th
                key={column.key}
                scope="col"
                aria-sort={column.sort?.direction}
                className={clsx(
                  'h-9 whitespace-nowrap border-b px-3 align-bottom font-semibold text-ink-soft',
                  column.sort ? '' : 'py-2',
                  column.kind === 'figure' ? 'text-right' : 'text-left',
                )}
              >
                {column.sort ? (
                  <SortableHeader sort={column.sort}>{column.header}</SortableHeader>
                ) : (
                  column.header
                )}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr
              key={rowKey(row)}
              className={clsx('border-b last:border-b-0', isMarked?.(row) && 'bg-verdigris-wash')}
            >
              {columns.map((column) => (
                <Cell key={column.key} column={column} row={row} />
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function Cell<Row>({ column, row }: { column: Column<Row>; row: Row }) {
  const look = clsx(
    'h-9 px-3 py-1',
    column.kind === 'figure' && 'whitespace-nowrap text-right font-mono',
    column.kind === 'action' && 'w-px whitespace-nowrap text-right',
    (column.kind ?? 'text') === 'text' && 'text-left',
  )
  if (column.isRowHeader) {
    return (
      <th scope="row" className={clsx(look, 'font-normal')}>
        {column.cell(row)}
      </th>
    )
  }
  return <td className={look}>{column.cell(row)}</td>
}
