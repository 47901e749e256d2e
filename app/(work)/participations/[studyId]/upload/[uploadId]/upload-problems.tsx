import { DataTable } from '@/app/ui/primitives/data-table'
import { Notice } from '@/app/ui/primitives/notice'
import type { CellProblem } from '@/lib/spreadsheet/cell-problem'

const causes: Record<string, string> = {
  'no-header': 'No table was recognised',
  'no-values': 'No value was found',
  'missing-column': 'Columns are missing',
  'duplicate-column': 'Columns stand twice',
  'duplicate-row': 'Test results are given twice',
  'other-unit': 'Values or titles carry another unit',
  'unknown-material': 'Materials that are not part of this study',
  'unknown-measurand': 'Measurands that are not part of this study',
  'empty-place': 'Rows that do not say which test result they give',
  'not-a-group-number': 'Numbers of days, replicates and the like that cannot be read',
  'group-out-of-range': 'Numbers of days, replicates and the like beyond what is asked',
  formula: 'Formulas in place of values',
  'error-cell': 'Cells that show an error',
  date: 'Dates in place of values',
  boolean: 'True or false in place of values',
  unit: 'Values with their unit',
  dash: 'Dashes in place of values',
  word: 'Words in place of values',
  uncertainty: 'Values with a spread',
}

/** Everything that keeps a file from being taken, at once, grouped by what would mend it. */
export function UploadProblems({ problems }: { problems: readonly CellProblem[] }) {
  if (problems.length === 0) return null
  return (
    <section aria-labelledby="problems" className="flex flex-col gap-4">
      <h2 id="problems" className="sr-only">
        What has to be mended
      </h2>
      <Notice
        tone="danger"
        title={
          problems.length === 1
            ? 'One thing has to be mended in the file'
            : `${problems.length} things have to be mended in the file`
        }
      >
        <p>Nothing of the file was returned. Mend the cells below, save it and send it again.</p>
      </Notice>
      {[...groupByCause(problems)].map(([cause, group]) => (
        <DataTable
          key={cause}
          caption={`${cause} (${group.length})`}
          rows={group}
          rowKey={(problem) =>
            `${problem.sheet}!${problem.cell}!${problem.column}!${problem.code}!${problem.message}`
          }
          columns={[
            {
              key: 'where',
              header: 'Where',
              isRowHeader: true,
              cell: ({ sheet, cell }) => (
                <span className="font-mono">{cell === null ? sheet : `${sheet}!${cell}`}</span>
              ),
            },
            { key: 'column', header: 'Column', cell: ({ column }) => column ?? '' },
            {
              key: 'found',
              header: 'Found',
              cell: ({ found, cell }) => (cell === null ? found : found === '' ? 'nothing' : `“${found}”`),
            },
            { key: 'wanted', header: 'Wanted', cell: ({ wanted }) => wanted },
            { key: 'advice', header: 'What to do', cell: adviceOf },
          ]}
        />
      ))}
    </section>
  )
}

function groupByCause(problems: readonly CellProblem[]): Map<string, CellProblem[]> {
  const groups = new Map<string, CellProblem[]>()
  for (const problem of problems) {
    const cause = causes[problem.code] ?? 'Values that cannot be read'
    groups.set(cause, [...(groups.get(cause) ?? []), problem])
  }
  return groups
}

/** The message ends in what to do; what stands before it has columns of its own here. */
function adviceOf({ message, wanted }: CellProblem): string {
  const marker = `, wanted ${wanted}. `
  const at = message.indexOf(marker)
  return at < 0 ? message : message.slice(at + marker.length)
}
