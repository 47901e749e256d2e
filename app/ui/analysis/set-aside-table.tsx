import type { ReactNode } from 'react'
import { DataTable } from '../primitives/data-table'
import { Tag } from '../primitives/tag'

export interface SetAsideCell {
  readonly code: string
  readonly material: string
  readonly reason: string
}

/** The cells that a person set aside, each with the written reason. */
export function SetAsideTable<Cell extends SetAsideCell>({
  cells,
  action,
}: {
  cells: readonly Cell[]
  action?: (cell: Cell) => ReactNode
}) {
  return (
    <DataTable
      caption="Cells set aside"
      isCaptionHidden
      rows={cells}
      rowKey={({ code, material }) => `${code} ${material}`}
      empty={<p className="text-ink-soft">No cell is set aside: every result counts.</p>}
      columns={[
        { key: 'code', header: 'Laboratory', isRowHeader: true, cell: ({ code }) => <Tag code={code} /> },
        { key: 'material', header: 'Material', cell: ({ material }) => material },
        { key: 'reason', header: 'Reason', cell: ({ reason }) => reason },
        ...(action
          ? [
              {
                key: 'action',
                header: <span className="sr-only">Change</span>,
                kind: 'action' as const,
                cell: action,
              },
            ]
          : []),
      ]}
    />
  )
}
