import clsx from 'clsx'
import { memo } from 'react'
import { measurandTitle, type LayoutRow, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { nameLevels, nameRow } from '../../name-place'
import { ResultCell } from './result-cell'

export interface MaterialGroup {
  readonly name: string
  /** Where the group's first row stands among all rows. */
  readonly firstRow: number
  readonly rows: readonly LayoutRow[]
}

interface MaterialRowsProps {
  layout: ReturnLayout
  group: MaterialGroup
  /** The texts of this group's places alone. */
  texts: readonly string[]
  /** The place one is in, or -1 when it lies in another group. */
  active: number
  isLive: boolean
  /** On a narrow screen one material is shown at a time. */
  isShown: boolean
  onText: (position: number, text: string) => void
}

/** The rows of one material. Drawn afresh only when one of its own texts changed: a sheet may hold thousands. */
export const MaterialRows = memo(function MaterialRows(props: MaterialRowsProps) {
  const { layout, group, texts, active, isLive, isShown, onText } = props
  const { measurands } = layout
  const hasHeading = layout.levels.some(({ count }) => count > 1)
  return (
    <tbody
      role="rowgroup"
      className={clsx(
        'border-b last:border-b-0 max-sm:block max-sm:border-0 sm:[&>tr:last-child>*]:pb-3',
        isLive && !isShown && 'max-sm:hidden',
      )}
    >
      {hasHeading && (
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
            {hasHeading ? sentence(nameLevels(layout, row.groups)) : group.name}
          </th>
          {measurands.map((measurand, column) => {
            const within = offset * measurands.length + column
            const position = group.firstRow * measurands.length + within
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
                  text={texts[within] ?? ''}
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
  )
}, isDrawnAlike)

function isDrawnAlike(
  { texts, ...one }: MaterialRowsProps,
  { texts: others, ...other }: MaterialRowsProps,
): boolean {
  const names = Object.keys(one) as (keyof typeof one)[]
  return (
    names.every((name) => one[name] === other[name]) && texts.every((text, index) => text === others[index])
  )
}

function sentence(words: string): string {
  return words.charAt(0).toLocaleUpperCase('en-GB') + words.slice(1)
}
