import { Figure } from '@/app/ui/primitives/figure'
import { mostDecimals } from '@/app/ui/primitives/most-decimals'
import { readReportedValue } from '@/lib/domain/reported-value'
import { listRows, measurandTitle, placeKey, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { nameLevels } from '../name-place'

interface ReportedTableProps {
  layout: ReturnLayout
  /** Reported texts by the key of their place. */
  texts: Readonly<Record<string, string>>
  caption: string
}

/** What a laboratory reports, row by row as the sheet and the workbook have it; whole on paper. */
export function ReportedTable({ layout, texts, caption }: ReportedTableProps) {
  const rows = listRows(layout)
  const decimals = layout.measurands.map(({ id }) =>
    mostDecimals(rows.map((row) => readAs(texts[placeKey({ ...row, measurandId: id })] ?? ''))),
  )
  const hasLevels = layout.levels.some(({ count }) => count > 1)
  return (
    <div
      role="region"
      aria-label={caption}
      tabIndex={0}
      data-scrolls
      className="w-fit max-w-full overflow-x-auto border bg-sheet"
    >
      <table className="w-full border-collapse text-small">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="border-b text-ink-soft">
            <th scope="col" className="h-9 px-4 sm:min-w-32 text-left font-semibold">
              Material
            </th>
            {hasLevels && (
              <th scope="col" className="h-9 px-4 sm:min-w-44 text-left font-semibold">
                Test result
              </th>
            )}
            {layout.measurands.map((measurand) => (
              <th key={measurand.id} scope="col" className="h-9 px-4 sm:min-w-40 text-right font-semibold">
                {measurandTitle(measurand)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, index) => (
            <tr key={index} className="border-b last:border-b-0">
              <th scope="row" className="h-9 px-4 text-left font-normal">
                {layout.materials.find(({ id }) => id === row.materialId)?.name}
              </th>
              {hasLevels && <td className="px-4">{nameLevels(layout, row.groups)}</td>}
              {layout.measurands.map(({ id }, column) => {
                const text = texts[placeKey({ ...row, measurandId: id })]
                return (
                  <td key={id} className="px-4 text-right">
                    {text?.trim() ? (
                      <Figure value={readAs(text)} alignTo={decimals[column] ?? 0} />
                    ) : (
                      <span className="text-ink-soft">no result</span>
                    )}
                  </td>
                )
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function readAs(text: string): string {
  const read = readReportedValue(text)
  if (read.kind === 'number') return read.decimal
  return read.kind === 'censored' ? read.mark + read.decimal : text
}
